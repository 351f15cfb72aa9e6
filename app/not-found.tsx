import Link from 'next/link';
import { Heading } from '@/app/ui/frame/Heading';
import { Sheet } from '@/app/ui/frame/Sheet';

export default function NotFound() {
  return (
    <Sheet>
      <Heading lead="The address names no page of this hub.">No such page</Heading>
      <Link href="/" className="font-semibold text-ink underline">
        Back to the start
      </Link>
    </Sheet>
  );
}
