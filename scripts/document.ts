import { readFileSync, writeFileSync } from 'node:fs';
import { buildDocument } from '@/openapi/document';

/** Writes openapi/openapi.json from the contracts; `--check` only compares. */
const path = new URL('../openapi/openapi.json', import.meta.url);
const text = `${JSON.stringify(buildDocument(), null, 2)}\n`;
if (process.argv.includes('--check')) {
  if (readFileSync(path, 'utf8') !== text) {
    console.error('openapi/openapi.json is not what the contracts say: run `npm run document`.');
    process.exit(1);
  }
} else {
  writeFileSync(path, text);
}
