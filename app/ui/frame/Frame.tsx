'use client';

import Link from 'next/link';
import { useParams, usePathname } from 'next/navigation';
import type { ReactNode } from 'react';
import { useWhoami } from '@/app/ui/data/whoami';
import type { Scope } from '@/openapi/scopes';
import { Brand } from './Brand';
import { Offline } from './Offline';
import { OpenCount } from './OpenCount';
import { PrintHead } from './PrintHead';
import { ProjectSwitch } from './ProjectSwitch';
import { SignOut } from './SignOut';
import { ThemeSwitch } from './ThemeSwitch';

const OF_A_PROJECT = [
  { path: 'setups', name: 'Setups' },
  { path: 'withdrawals', name: 'Withdrawals' },
  { path: 'control', name: 'Control' },
  { path: 'grade', name: 'Grade' },
  { path: 'uploads', name: 'Uploads' },
];

const OF_THE_HUB: { path: string; name: string; scope?: Scope }[] = [
  { path: '/keys', name: 'Keys', scope: 'keys:read' },
  { path: '/hooks', name: 'Hooks', scope: 'webhooks:read' },
  { path: '/people', name: 'People', scope: 'people:read' },
  { path: '/audit', name: 'Audit', scope: 'audit:read' },
  { path: '/reference', name: 'Reference' },
];

/**
 * The console's page: the margin line of a field book with its sections, and the sheet beside it. Whoever is not
 * signed in sees the sections that are open to all.
 */
export function Frame({ children }: { children: ReactNode }) {
  const { projectId } = useParams<{ projectId?: string }>();
  const pathname = usePathname();
  const { data: me, isError: isStranger } = useWhoami();
  // The library that lays out the API document brings a main part of its own.
  const Main = pathname === '/reference' ? 'div' : 'main';
  const entry = (href: string, name: string, beside?: ReactNode) => (
    <li key={href}>
      <Link
        href={href}
        aria-current={pathname.startsWith(href) ? 'page' : undefined}
        className="flex py-2 pr-3 font-medium text-ink-second no-underline hover:text-ink aria-[current]:font-semibold aria-[current]:text-ink max-md:border-b-[3px] max-md:border-transparent max-md:px-2 max-md:aria-[current]:border-mark md:-mr-px md:border-r-[3px] md:border-transparent md:aria-[current]:border-mark"
      >
        {name}
        {beside}
      </Link>
    </li>
  );
  return (
    <div className="min-h-screen md:grid md:grid-cols-[212px_minmax(0,1fr)] print:block">
      <a
        href="#page"
        className="absolute top-2 left-2 z-20 -translate-y-20 rounded bg-ink px-4 py-2 font-semibold text-paper focus:translate-y-0"
      >
        Skip to the page
      </a>
      <div className="border-mark max-md:border-b md:border-r print:hidden">
        <header className="md:sticky md:top-0 md:flex md:h-screen md:flex-col md:py-6 md:pl-6">
          <div className="flex items-center justify-between px-5 py-4 md:p-0">
            <Brand />
            <div className="md:hidden">
              <ThemeSwitch />
            </div>
          </div>
          {isStranger ? <div className="md:h-8" /> : <ProjectSwitch projectId={projectId} />}
          <nav aria-label="Sections" className="max-md:px-3">
            <ul className="max-md:flex max-md:flex-wrap">
              {projectId
                ? OF_A_PROJECT.map(({ path, name }) =>
                    entry(
                      `/projects/${projectId}/${path}`,
                      name,
                      path === 'withdrawals' ? <OpenCount projectId={projectId} /> : null,
                    ),
                  )
                : null}
              {projectId ? (
                <li
                  aria-hidden="true"
                  className="border-rule max-md:basis-full md:my-2.5 md:mr-6 md:border-t"
                />
              ) : null}
              {OF_THE_HUB.filter(({ scope }) => !scope || me?.scopes.includes(scope)).map(({ path, name }) =>
                entry(path, name),
              )}
              {isStranger ? entry('/sign-in', 'Sign in') : null}
            </ul>
          </nav>
          <div className="mt-auto space-y-3 pt-8 pr-6 max-md:hidden">
            <ThemeSwitch />
            <SignOut />
          </div>
        </header>
      </div>
      <Main
        id="page"
        tabIndex={-1}
        className="max-w-[1300px] px-5 pt-6 pb-14 outline-none md:px-10 print:max-w-none print:p-0"
      >
        <PrintHead projectId={projectId} />
        <Offline />
        {children}
      </Main>
      <footer className="px-5 pb-10 md:hidden print:hidden">
        <SignOut />
      </footer>
    </div>
  );
}
