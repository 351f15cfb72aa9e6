import type { Metadata, Viewport } from 'next';
import { headers } from 'next/headers';
import type { ReactNode } from 'react';
import { code, head, text } from './fonts';
import './globals.css';

export const metadata: Metadata = {
  title: { default: 'Hubtack', template: '%s · Hubtack' },
  description: 'The hub in which an earthmoving site’s survey observations, setups and grade checks meet.',
};

export const viewport: Viewport = {
  themeColor: [
    { media: '(prefers-color-scheme: light)', color: '#f7f4ea' },
    { media: '(prefers-color-scheme: dark)', color: '#141817' },
  ],
};

export default async function RootLayout({ children }: { children: ReactNode }) {
  // Reading the headers makes every page dynamic: a page made beforehand could carry no nonce.
  const nonce = (await headers()).get('x-nonce') ?? undefined;
  return (
    <html lang="en" suppressHydrationWarning className={`${text.variable} ${head.variable} ${code.variable}`}>
      <head>
        <script src="/theme.js" nonce={nonce} />
      </head>
      <body>{children}</body>
    </html>
  );
}
