'use client';

import { useState } from 'react';

/** A figure that can be copied with its unit: a press copies, a word says so. */
export function Figure({ value, unit, label }: { value: string; unit?: string; label?: string }) {
  const [copied, setCopied] = useState(false);
  const text = unit ? `${value} ${unit}` : value;
  async function copy() {
    await navigator.clipboard.writeText(text.replaceAll('\u2212', '-').replaceAll(',', ''));
    setCopied(true);
    setTimeout(() => setCopied(false), 1200);
  }
  return (
    <button
      type="button"
      onClick={copy}
      title={`Copy ${text}`}
      aria-label={`${label ? `${label}: ` : ''}${text}. Copy`}
      className="relative cursor-copy rounded font-medium whitespace-nowrap hover:bg-mark-soft print:cursor-auto"
    >
      {value}
      <span role="status" className="absolute top-full right-0 z-10 text-[12px] font-semibold text-mark">
        {copied ? 'copied' : ''}
      </span>
    </button>
  );
}
