import type { Metadata } from 'next';
import { Queries } from '@/app/ui/data/Queries';
import { Sheet } from '@/app/ui/frame/Sheet';
import { Accept } from './Accept';

export const metadata: Metadata = { title: 'Invitation' };

export default function InvitationPage() {
  return (
    <Sheet>
      <Queries open>
        <Accept />
      </Queries>
    </Sheet>
  );
}
