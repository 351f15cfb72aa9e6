import type { Metadata } from 'next';
import { HookSheet } from './HookSheet';

export const metadata: Metadata = { title: 'Hook' };

export default async function HookPage({ params }: { params: Promise<{ webhookEndpointId: string }> }) {
  return <HookSheet {...(await params)} />;
}
