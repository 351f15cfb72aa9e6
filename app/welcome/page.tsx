import type { Metadata } from 'next';
import { Queries } from '@/app/ui/data/Queries';
import { Sheet } from '@/app/ui/frame/Sheet';
import { Welcome } from './Welcome';

export const metadata: Metadata = { title: 'Welcome' };

export default function WelcomePage() {
  return (
    <Sheet>
      <Queries open>
        <Welcome />
      </Queries>
    </Sheet>
  );
}
