import type { Metadata } from 'next';
import { Control } from './Control';

export const metadata: Metadata = { title: 'Control' };

export default async function ControlPage({ params }: { params: Promise<{ projectId: string }> }) {
  return <Control projectId={(await params).projectId} />;
}
