import { execFile } from 'node:child_process';
import { fileURLToPath } from 'node:url';

export const EXAMPLES = fileURLToPath(new URL('../../examples/', import.meta.url));

/** The walks by their language: program, script from the folder of the examples, and arguments. */
const WALKS = {
  walk: {
    curl: ['bash', 'curl/walk.sh'],
    python: ['/usr/bin/python3', 'python/walk.py'],
    node: [process.execPath, 'node/walk.mjs', '--json'],
  },
  'control-walk': {
    curl: ['bash', 'curl/control-walk.sh'],
    python: ['/usr/bin/python3', 'python/control-walk.py'],
    node: [process.execPath, 'node/control-walk.mjs'],
  },
} as const;

export type WalkName = keyof typeof WALKS;
export type Language = keyof (typeof WALKS)[WalkName];
export const LANGUAGES = Object.keys(WALKS.walk) as Language[];

export interface Walked {
  code: number;
  out: string;
  problem: string;
}

/** Runs a script with the address and the key of a hub and nothing else of this process' settings but the path. */
export function walk(
  name: WalkName,
  language: Language,
  settings: { HUBTACK_URL?: string; HUBTACK_KEY?: string },
  folder = EXAMPLES,
): Promise<Walked> {
  const [program, script, ...more] = WALKS[name][language];
  const { PATH, NODE_ENV } = process.env;
  const env = { PATH, NODE_ENV, ...settings };
  return new Promise((resolve) => {
    execFile(program, [`${folder}${script}`, ...more], { env }, (error, out, problem) =>
      resolve({ code: error ? Number(error.code ?? -1) : 0, out, problem }),
    );
  });
}
