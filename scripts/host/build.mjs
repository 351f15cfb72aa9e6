import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { run } from './children.mjs';
import { openLog } from './logs.mjs';
import { root } from './paths.mjs';

const inputFolders = ['app', 'db', 'lib', 'openapi', 'public'];
const inputScripts = ['scripts/vendor.ts'];
const inputFile = /\.(ts|mts|js|mjs|cjs|json|css)$/;
// Written by the build or by the tools around it.
const products = new Set(['next-env.d.ts', 'public/vendor']);
const stamp = join(root, '.next', 'built-from');

/** Builds the web app where what it is made of has changed since the last build. */
export async function build(folder) {
  // Taken first: a file changed while the build runs makes the next one build again.
  const inputs = hashOfInputs();
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === inputs) return false;
  await run('The web app could not be built.', 'npm', ['run', 'build'], {
    env: { ...process.env, NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' },
    log: openLog(folder, 'build'),
    ending: { patienceSeconds: 2 },
    remedy: `Mend what is named below; all of it is in ${join(folder, 'logs', 'build.log')}.`,
  });
  writeFileSync(stamp, inputs);
  return true;
}

function hashOfInputs() {
  const hash = createHash('sha256').update(process.version);
  const top = readdirSync(root, { withFileTypes: true });
  const files = top
    .filter((entry) => entry.isFile() && inputFile.test(entry.name))
    .map((entry) => entry.name);
  const folders = inputFolders.filter((name) => existsSync(join(root, name)));
  for (const path of [...files, ...inputScripts, ...folders.flatMap(filesIn)].sort()) {
    if (products.has(path)) continue;
    const content = createHash('sha256')
      .update(readFileSync(join(root, path)))
      .digest('hex');
    hash.update(`\n${path} ${content}`);
  }
  return hash.digest('hex');
}

function filesIn(folder) {
  if (products.has(folder)) return [];
  return readdirSync(join(root, folder), { withFileTypes: true }).flatMap((entry) => {
    const path = `${folder}/${entry.name}`;
    if (entry.isDirectory()) return filesIn(path);
    return entry.isFile() ? [path] : [];
  });
}
