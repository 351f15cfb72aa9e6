import type { ReactNode } from 'react';

export function Heading({ children, lead }: { children: ReactNode; lead?: ReactNode }) {
  return (
    <div className="mb-7">
      <h1 className="font-head text-4xl leading-none md:text-[44px]">{children}</h1>
      {lead ? <p className="mt-3 max-w-[62ch] text-ink-second">{lead}</p> : null}
    </div>
  );
}
