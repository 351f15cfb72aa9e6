import { copyFileSync, mkdirSync } from 'node:fs';

/** Copies the reference page's library to where this origin serves it. */
const root = new URL('../', import.meta.url);
mkdirSync(new URL('public/vendor/', root), { recursive: true });
copyFileSync(
  new URL('node_modules/@scalar/api-reference/dist/browser/standalone.js', root),
  new URL('public/vendor/reference.js', root),
);
