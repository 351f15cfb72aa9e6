import { forceAll, stopAll } from './children.mjs';
import { Cancelled, explain } from './failure.mjs';
import { endSteps, say } from './steps.mjs';

// npm passes on the signal that the terminal has sent already: the echo is no second Ctrl-C.
const echoMilliseconds = 1000;

/** Runs a script's main work and ends everything in order afterwards, on Ctrl-C too; a second Ctrl-C forces. */
export async function conduct(main, { codeWhenStopped = 0 } = {}) {
  let ending;
  let askedAt = 0;

  const end = (code) => {
    ending ??= stopAll().then(() => {
      if (askedAt) say('  Stopped.');
      process.exit(code);
    });
    return ending;
  };
  const asked = (signal) => {
    if (!ending) {
      askedAt = performance.now();
      endSteps();
      say('\n  Stopping …');
      end(codeWhenStopped);
    } else if (signal === 'SIGINT' && performance.now() - askedAt > echoMilliseconds) {
      forceAll();
      process.exit(130);
    }
  };
  const failed = (error) => {
    endSteps();
    if (!ending && !(error instanceof Cancelled)) process.stderr.write(explain(error));
    return end(1);
  };
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, asked);
  process.on('uncaughtException', failed);

  try {
    await end((await main()) ?? 0);
  } catch (error) {
    await failed(error);
  }
}
