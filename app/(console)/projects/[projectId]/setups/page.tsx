import type { Metadata } from 'next';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Setups } from './Setups';

export const metadata: Metadata = { title: 'Setups' };

export default async function SetupsPage({ params }: { params: Promise<{ projectId: string }> }) {
  return (
    <>
      <Crumb trail={[{ name: 'Setups' }]} />
      <PageHead
        title="Setups"
        sub="Where instruments stood, how well that is known, and who may work from it."
      />
      <Setups projectId={(await params).projectId} />
    </>
  );
}
