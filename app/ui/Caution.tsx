import type { ReactNode } from 'react';

/** Stands beside the button that it concerns. */
export function Caution({ children }: { children: ReactNode }) {
  return (
    <div className="rounded border-[1.5px] border-hold bg-hold-soft px-4 py-3 text-sm leading-snug">
      <p className="font-semibold text-hold">Before any blade moves</p>
      <div className="mt-1 space-y-1">{children}</div>
    </div>
  );
}
