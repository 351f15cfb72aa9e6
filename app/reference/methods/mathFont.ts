import localFont from 'next/font/local';

/** Formulas; loaded on the pages that have some. */
export const math = localFont({
  variable: '--font-math',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
  src: '../../../node_modules/@fontsource/noto-sans-math/files/noto-sans-math-latin-400-normal.woff2',
  weight: '400',
});
