/** Something a person can act on: one plain sentence, what to do, and the last lines of what went wrong. */
export class Failure extends Error {
  constructor(sentence, { remedy = '', tail = '' } = {}) {
    super(remedy ? `${sentence} ${remedy}` : sentence);
    this.sentence = sentence;
    this.remedy = remedy;
    this.tail = tail;
  }
}

/** The work was given up because a stop was asked for; nothing to report. */
export class Cancelled extends Error {}

export function explain(error) {
  const known = error instanceof Failure ? error : translated(error);
  const lines = ['', `  ✗ ${known.sentence}`];
  if (known.remedy) lines.push(...known.remedy.split('\n').map((line) => `    ${line}`));
  if (known.tail) lines.push('', ...known.tail.split('\n').map((line) => `    │ ${line}`));
  return `${lines.join('\n')}\n`;
}

function translated(error) {
  if ((error?.code === 'EACCES' || error?.code === 'EPERM') && error.path) {
    return new Failure(`This user may not use ${error.path}.`, {
      remedy: 'Run as the user it belongs to, or set HUBTACK_DATA to a folder of your own.',
    });
  }
  return new Failure(`Unexpected: ${error?.message ?? error}`, { tail: error?.stack ?? '' });
}
