import { spawnSync } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';

interface Report {
  diagnostics: { category: string; message: string; location: { path: string } }[];
}

/**
 * What the linter says, by the house's own rules, of source texts as if they stood in the house.
 *
 * @param sources text by path
 * @returns what was found, by path, as `rule: message`
 */
export function lintTree(sources: Record<string, string>): Record<string, string[]> {
  const folder = mkdtempSync(join(tmpdir(), 'hubtack-lint-'));
  try {
    for (const file of ['biome.json', '.gitignore', 'tests/lint'])
      cpSync(file, join(folder, file), { recursive: true });
    for (const [path, text] of Object.entries(sources)) {
      mkdirSync(join(folder, dirname(path)), { recursive: true });
      writeFileSync(join(folder, path), text);
    }
    const biome = resolve('node_modules/.bin/biome');
    const options = ['lint', '--reporter=json', '--max-diagnostics=none', ...Object.keys(sources)];
    const { stdout, stderr } = spawnSync(biome, options, { cwd: folder, encoding: 'utf8' });
    if (!stdout.startsWith('{')) throw new Error(`The linter did not run: ${stdout}${stderr}`);
    const found: Record<string, string[]> = Object.fromEntries(
      Object.keys(sources).map((path) => [path, []]),
    );
    for (const { category, message, location } of (JSON.parse(stdout) as Report).diagnostics)
      found[location.path].push(`${category}: ${message}`);
    return found;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
