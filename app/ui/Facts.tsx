import type { ReactNode } from 'react';

export interface Fact {
  value: ReactNode;
  word: string;
}

/** A few figures to be read at one glance. */
export function Facts({ facts }: { facts: readonly Fact[] }) {
  return (
    <dl className="mb-7 grid grid-cols-2 rounded border border-rule bg-sheet md:auto-cols-fr md:grid-flow-col md:grid-cols-none">
      {facts.map(({ value, word }) => (
        <div
          key={word}
          className="flex flex-col-reverse justify-end border-rule px-4.5 py-3.5 not-first:border-l max-md:odd:border-l-0 max-md:nth-[n+3]:border-t max-md:odd:last:col-span-2"
        >
          <dt className="text-[13.5px] text-ink-second">{word}</dt>
          <dd className="font-head text-[26px] leading-tight">{value}</dd>
        </div>
      ))}
    </dl>
  );
}
