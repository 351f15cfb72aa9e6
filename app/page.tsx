import { Queries } from '@/app/ui/data/Queries';
import { Heading } from '@/app/ui/frame/Heading';
import { Sheet } from '@/app/ui/frame/Sheet';
import { Ways } from './Ways';

export default function Home() {
  return (
    <Sheet>
      <Heading lead="Raw observations in, kept as they came; setups, checks and grade out, with an honest verdict in plain words.">
        The hub of the site
      </Heading>
      <Queries open>
        <Ways />
      </Queries>
    </Sheet>
  );
}
