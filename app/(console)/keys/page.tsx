import type { Metadata } from 'next';
import { Keys } from './Keys';

export const metadata: Metadata = { title: 'Keys' };

export default function KeysPage() {
  return <Keys />;
}
