import type { Metadata } from 'next';
import { Hooks } from './Hooks';

export const metadata: Metadata = { title: 'Hooks' };

export default function HooksPage() {
  return <Hooks />;
}
