import type { Metadata } from 'next';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Inbox } from './Inbox';

export const metadata: Metadata = { title: 'Uploads' };

export default async function UploadsPage({ params }: { params: Promise<{ projectId: string }> }) {
  return (
    <>
      <Crumb trail={[{ name: 'Uploads' }]} />
      <PageHead title="Uploads" sub="Everything that was sent in, kept as it came, whatever became of it." />
      <Inbox projectId={(await params).projectId} />
    </>
  );
}
