import type { Metadata } from 'next';
import { Layers } from './Layers';

export const metadata: Metadata = { title: 'Grade' };

export default async function GradePage({ params }: { params: Promise<{ projectId: string }> }) {
  return <Layers projectId={(await params).projectId} />;
}
