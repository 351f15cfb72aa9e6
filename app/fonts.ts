import localFont from 'next/font/local';

/** Text and figures. */
export const text = localFont({
  variable: '--font-text',
  display: 'swap',
  src: [
    { path: '../node_modules/@fontsource/barlow/files/barlow-latin-400-normal.woff2', weight: '400' },
    { path: '../node_modules/@fontsource/barlow/files/barlow-latin-500-normal.woff2', weight: '500' },
    { path: '../node_modules/@fontsource/barlow/files/barlow-latin-600-normal.woff2', weight: '600' },
  ],
});

/** Headings and table heads. */
export const head = localFont({
  variable: '--font-head',
  display: 'swap',
  src: '../node_modules/@fontsource/barlow-semi-condensed/files/barlow-semi-condensed-latin-600-normal.woff2',
  weight: '600',
});

/** Keys, ids and code. */
export const code = localFont({
  variable: '--font-code',
  display: 'swap',
  src: '../node_modules/@fontsource/ibm-plex-mono/files/ibm-plex-mono-latin-400-normal.woff2',
  weight: '400',
});
