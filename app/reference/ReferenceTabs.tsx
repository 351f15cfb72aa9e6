'use client';

import Link from 'next/link';
import { usePathname } from 'next/navigation';

const TABS = [
  { href: '/reference', name: 'API' },
  { href: '/reference/problems', name: 'Problems' },
  { href: '/reference/conventions', name: 'Signs and conventions' },
  { href: '/reference/methods', name: 'Methods' },
];

export function ReferenceTabs() {
  const pathname = usePathname();
  const isHere = (href: string) => (href === '/reference' ? pathname === href : pathname.startsWith(href));
  return (
    <nav aria-label="Reference" className="mb-7 border-b border-rule print:hidden">
      <ul className="flex flex-wrap gap-x-6">
        {TABS.map(({ href, name }) => (
          <li key={href}>
            <Link
              href={href}
              aria-current={isHere(href) ? 'page' : undefined}
              className="-mb-px block border-b-2 border-transparent pb-2 font-medium text-ink-second no-underline hover:text-ink aria-[current]:border-mark aria-[current]:font-semibold aria-[current]:text-ink"
            >
              {name}
            </Link>
          </li>
        ))}
      </ul>
    </nav>
  );
}
