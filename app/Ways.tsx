'use client';

import Link from 'next/link';
import { useRead } from '@/app/ui/data/queries';
import { useWhoami } from '@/app/ui/data/whoami';
import type * as contracts from '@/openapi/contracts/hub';

interface Way {
  href: string;
  name: string;
  what: string;
}

const BEGIN = { href: '/welcome', name: 'Begin', what: 'This hub is empty: make its first administrator.' };
const SIGN_IN = {
  href: '/sign-in',
  name: 'Sign in',
  what: 'For people who run setups, check grade or keep the hub.',
};
const PROJECTS = {
  href: '/projects',
  name: 'Projects',
  what: 'Setups, control, grade and what was sent in.',
};
const ALWAYS: Way[] = [
  {
    href: '/reference',
    name: 'Reference',
    what: 'Every operation of the API, with its fields, units and problems.',
  },
  {
    href: '/reference/conventions',
    name: 'Signs and conventions',
    what: 'Which way is plus: heights, constants, residuals, cut and fill.',
  },
];

/** Where to go from here, by who is asking. */
export function Ways() {
  const hub = useRead<typeof contracts.getHub>('/hub').data;
  const me = useWhoami().data;
  const first = hub?.empty ? BEGIN : me ? PROJECTS : SIGN_IN;
  return (
    <ul className="max-w-[62ch] border-t border-rule">
      {[first, ...ALWAYS].map(({ href, name, what }) => (
        <li key={href} className="border-b border-rule">
          <Link href={href} className="group block py-4 no-underline">
            <span className="font-head text-[19px] text-ink group-hover:text-mark">{name}</span>
            <span className="block text-ink-second">{what}</span>
          </Link>
        </li>
      ))}
    </ul>
  );
}
