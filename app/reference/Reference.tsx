'use client';

import Script from 'next/script';
import { useRef } from 'react';

interface Library {
  createApiReference(element: Element, configuration: Record<string, unknown>): unknown;
}

/** The document as a page: library and document from this origin, nothing from elsewhere. */
const CONFIGURATION = {
  url: '/api/v1/openapi.json',
  withDefaultFonts: false,
  telemetry: false,
  proxyUrl: '',
  agent: { disabled: true },
  hideClientButton: true,
  hideDarkModeToggle: true,
  showDeveloperTools: 'never',
  customCss: `
    .light-mode, .dark-mode {
      --scalar-font: var(--font-text), system-ui, sans-serif;
      --scalar-font-code: var(--font-code), ui-monospace, monospace;
      --scalar-background-1: var(--paper);
      --scalar-background-2: var(--sheet);
      --scalar-background-3: var(--rule);
      --scalar-border-color: var(--rule);
      --scalar-color-1: var(--ink);
      --scalar-color-2: var(--ink-second);
      --scalar-color-3: var(--ink-third);
      --scalar-color-accent: var(--mark);
      --scalar-color-green: var(--pass);
      --scalar-color-blue: var(--fill);
      --scalar-color-orange: var(--cut);
      --scalar-color-yellow: var(--hold);
      --scalar-color-red: var(--fail);
      --scalar-color-purple: var(--mark);
      --scalar-radius: 3px;
      --scalar-radius-lg: 3px;
    }`,
} as const;

export function Reference({ nonce }: { nonce?: string }) {
  const place = useRef<HTMLDivElement>(null);
  const show = () => {
    const { Scalar } = window as typeof window & { Scalar?: Library };
    if (Scalar && place.current) {
      const { theme } = document.documentElement.dataset;
      const dark = theme ? theme === 'night' : window.matchMedia('(prefers-color-scheme: dark)').matches;
      Scalar.createApiReference(place.current, {
        ...CONFIGURATION,
        forceDarkModeState: dark ? 'dark' : 'light',
      });
    }
  };
  return (
    <section aria-labelledby="reference-title">
      <h1 id="reference-title" className="sr-only">
        API reference
      </h1>
      <div ref={place} className="-mx-5 md:-mx-10">
        <p className="p-10 text-ink-second">The reference is being laid out…</p>
      </div>
      <Script src="/vendor/reference.js" nonce={nonce} strategy="afterInteractive" onReady={show} />
    </section>
  );
}
