import Link from 'next/link';
import { Heading } from '@/app/ui/frame/Heading';
import { Sheet } from '@/app/ui/frame/Sheet';

const WAYS = [
  { href: '/sign-in', name: 'Sign in', what: 'For people who run setups, check grade or keep the hub.' },
  {
    href: '/reference',
    name: 'Reference',
    what: 'Every operation of the API, with its fields, units and problems.',
  },
  {
    href: '/reference/problems',
    name: 'Problems',
    what: 'What each problem code means and what to do about it.',
  },
];

export default function Home() {
  return (
    <Sheet>
      <Heading lead="Raw observations in, kept as they came; setups, checks and grade out, with an honest verdict in plain words.">
        The hub of the site
      </Heading>
      <ul className="max-w-[62ch] border-t border-rule">
        {WAYS.map(({ href, name, what }) => (
          <li key={href} className="border-b border-rule">
            <Link href={href} className="group block py-4 no-underline">
              <span className="font-head text-[19px] text-ink group-hover:text-mark">{name}</span>
              <span className="block text-ink-second">{what}</span>
            </Link>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
