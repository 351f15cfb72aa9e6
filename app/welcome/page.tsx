import type { Metadata } from 'next';
import { Queries } from '@/app/ui/data/Queries';
import { Heading } from '@/app/ui/frame/Heading';
import { Sheet } from '@/app/ui/frame/Sheet';
import { Welcome } from './Welcome';

export const metadata: Metadata = { title: 'Welcome' };

export default function WelcomePage() {
  return (
    <Sheet>
      <Heading lead="This hub is empty. Name the organization that it serves and make its first administrator, who invites everybody else.">
        Welcome
      </Heading>
      <Queries open>
        <Welcome />
      </Queries>
    </Sheet>
  );
}
