import type { Metadata } from 'next';
import { SetupSheet } from './SetupSheet';

export const metadata: Metadata = { title: 'Setup' };

export default async function SetupPage({
  params,
}: {
  params: Promise<{ projectId: string; setupId: string }>;
}) {
  return <SetupSheet {...(await params)} />;
}
