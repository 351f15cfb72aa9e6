import { mkdirSync, writeFileSync } from 'node:fs';
import { DATA_FOLDER, dataFiles } from './generator/files';

/** Writes examples/data anew: node --import tsx tests/examples/make-data.ts */
mkdirSync(DATA_FOLDER, { recursive: true });
for (const [name, text] of Object.entries(dataFiles())) writeFileSync(new URL(name, DATA_FOLDER), text);
