'use client';

import { useEffect, useRef, useState } from 'react';
import { copy, select } from './clipboard';

/** A figure that can be copied with its unit: a press copies, a word says so. */
export function Figure({ value, unit, label }: { value: string; unit?: string; label?: string }) {
  const byHand = useRef<HTMLSpanElement>(null);
  const [outcome, setOutcome] = useState<'copied' | 'byHand' | null>(null);
  const text = unit ? `${value} ${unit}` : value;
  const written = text.replaceAll('\u2212', '-').replaceAll(',', '');
  useEffect(() => {
    if (outcome === 'byHand' && byHand.current) select(byHand.current);
  }, [outcome]);
  async function press() {
    setOutcome(null);
    const copied = await copy(written);
    setOutcome(copied ? 'copied' : 'byHand');
    if (copied) setTimeout(() => setOutcome(null), 1200);
  }
  return (
    <span className="relative">
      <button
        type="button"
        onClick={press}
        onBlur={() => setOutcome(null)}
        title={`Copy ${text}`}
        aria-label={`${label ? `${label}: ` : ''}${text}. Copy`}
        className="cursor-copy rounded font-medium whitespace-nowrap hover:bg-mark-soft print:cursor-auto"
      >
        {value}
      </button>
      <span
        role="status"
        className="absolute top-full right-0 z-10 text-[12px] font-semibold whitespace-nowrap text-mark"
      >
        {outcome === 'copied' ? 'copied' : null}
        {outcome === 'byHand' ? (
          <span className="block rounded border border-mark bg-sheet px-2.5 py-1.5">
            <span ref={byHand} className="text-ink">
              {written}
            </span>{' '}
            is selected: press Ctrl+C
          </span>
        ) : null}
      </span>
    </span>
  );
}
