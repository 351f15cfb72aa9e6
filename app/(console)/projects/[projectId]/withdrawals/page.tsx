import type { Metadata } from 'next';
import { Withdrawals } from './Withdrawals';

export const metadata: Metadata = { title: 'Withdrawals' };

export default async function WithdrawalsPage({ params }: { params: Promise<{ projectId: string }> }) {
  return <Withdrawals projectId={(await params).projectId} />;
}
