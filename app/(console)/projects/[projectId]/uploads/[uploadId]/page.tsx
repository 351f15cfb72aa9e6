import type { Metadata } from 'next';
import { ReceiptSheet } from './ReceiptSheet';

export const metadata: Metadata = { title: 'Receipt' };

export default async function UploadPage({
  params,
}: {
  params: Promise<{ projectId: string; uploadId: string }>;
}) {
  return <ReceiptSheet {...(await params)} />;
}
