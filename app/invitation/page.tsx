import type { Metadata } from 'next';
import { Queries } from '@/app/ui/data/Queries';
import { Heading } from '@/app/ui/frame/Heading';
import { Sheet } from '@/app/ui/frame/Sheet';
import { Accept } from './Accept';

export const metadata: Metadata = { title: 'Invitation' };

export default function InvitationPage() {
  return (
    <Sheet>
      <Heading lead="Set the password that you will sign in with. The link works once.">
        You are invited
      </Heading>
      <Queries open>
        <Accept />
      </Queries>
    </Sheet>
  );
}
