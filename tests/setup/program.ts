import { type ChildProcess, spawn } from 'node:child_process';
import { createInterface } from 'node:readline';

/** How a program ended. */
export interface End {
  code: number | null;
  signal: NodeJS.Signals | null;
}

export interface Program {
  child: ChildProcess;
  /** Waits for a line of its standard output; fails where the program ends without it. */
  said(pattern: RegExp): Promise<RegExpExecArray>;
  /** Passes on each further line; null lets them go unread. */
  listen(listener: ((line: string) => void) | null): void;
  ended: Promise<End>;
  /** Everything that it wrote on standard error. */
  complaints(): string;
  /** Sends a signal, if it still runs, and waits until it has ended. */
  stop(signal?: NodeJS.Signals): Promise<End>;
}

/** Starts a script of the hub as `npm start` does, in a process of its own. */
export function startProgram(script: string, environment: Record<string, string>): Program {
  const child = spawn(process.execPath, ['--import', 'tsx', script], {
    env: { ...process.env, ...environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  const lines = createInterface({ input: child.stdout! });
  let written = '';
  child.stderr!.setEncoding('utf8').on('data', (text: string) => {
    written += text;
  });
  const ended = new Promise<End>((resolve) => {
    child.once('close', (code, signal) => resolve({ code, signal }));
  });
  return {
    child,
    ended,
    complaints: () => written,
    said: (pattern) =>
      new Promise((resolve, reject) => {
        const look = (line: string) => {
          const match = pattern.exec(line);
          if (!match) return;
          lines.off('line', look);
          resolve(match);
        };
        lines.on('line', look);
        ended.then(({ code }) => reject(new Error(`${script} ended with ${code}.\n${written}`)));
      }),
    listen: (listener) => {
      lines.removeAllListeners('line');
      if (listener) lines.on('line', listener);
      else {
        lines.close();
        child.stdout!.resume();
      }
    },
    stop: (signal = 'SIGTERM') => {
      if (child.exitCode === null && child.signalCode === null) child.kill(signal);
      return ended;
    },
  };
}
