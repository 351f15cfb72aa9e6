import Link from 'next/link';
import type { ReactNode } from 'react';
import { Times } from './Times';

/** The line above a page: where it is, and the units and the zone of time that hold for it. */
export function Crumb({ trail, note }: { trail: { name: string; href?: string }[]; note?: ReactNode }) {
  return (
    <div className="mb-5 flex justify-between gap-6 border-b border-rule pb-2.5 text-[13.5px] text-ink-third">
      <nav aria-label="Place" className="shrink-0">
        {trail.map(({ name, href }, i) => (
          <span key={name}>
            {i > 0 ? ' / ' : null}
            {href ? (
              <Link href={href} className="underline">
                {name}
              </Link>
            ) : (
              <span aria-current="page">{name}</span>
            )}
          </span>
        ))}
      </nav>
      <div className="flex flex-wrap justify-end gap-x-5 text-right">
        {note ? <span>{note}</span> : null}
        <span>
          <Times />
        </span>
      </div>
    </div>
  );
}

/** Title, what it is, and what is stamped on it. */
export function PageHead({
  title,
  sub,
  aside,
  children,
}: {
  title: string;
  sub?: ReactNode;
  aside?: ReactNode;
  children?: ReactNode;
}) {
  return (
    <header className="mb-6 flex flex-wrap items-start justify-between gap-x-7 gap-y-4">
      <div className="min-w-0 grow basis-[20rem]">
        <h1 className="font-head text-4xl leading-none tracking-[-0.01em] md:text-[44px]">{title}</h1>
        {sub ? <div className="mt-2 text-ink-second">{sub}</div> : null}
        {children}
      </div>
      {aside}
    </header>
  );
}
