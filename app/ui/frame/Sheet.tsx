import type { ReactNode } from 'react';
import { Brand } from './Brand';

/** A page outside the console: the margin line of a field book, and what stands beside it. */
export function Sheet({ children }: { children: ReactNode }) {
  return (
    <div className="min-h-screen border-mark md:ml-[clamp(24px,12vw,212px)] md:border-l">
      <header className="border-b border-mark px-6 py-5 md:border-b-0 md:px-10 md:pt-7">
        <Brand />
      </header>
      <main className="px-6 py-8 md:px-10">{children}</main>
    </div>
  );
}
