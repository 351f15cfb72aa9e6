import { join } from 'node:path';
import { shown } from './paths.mjs';
import { bold, faint, say } from './steps.mjs';

const widest = 110;

export function report({ address, demo, verdicts, notes, folder }) {
  say();
  say(`  ${bold('Hubtack')}  ${bold(address.publicUrl)}`);
  if (demo) {
    say();
    for (const line of table(['Sign in as', 'e-mail', 'password'], demo.people.map(rowOf))) say(`  ${line}`);
    say();
    say(`  API key  ${demo.key}`);
  }
  if (verdicts.length > 0) say();
  const width = Math.max(...verdicts.map(({ subject }) => subject.length));
  for (const { subject, verdict, radio } of verdicts) {
    const lead = `  ${subject.padEnd(width)}  ${verdict.toUpperCase().padEnd(4)}  `;
    say(hanging(lead, radio));
  }
  if (notes.length > 0) say();
  for (const note of notes) say(`  ${note}`);
  say();
  say(faint(`  Logs in ${shown(join(folder, 'logs'))} · Ctrl-C stops everything`));
  say();
}

const rowOf = ({ role, email, password }) => [role, email, password];

function table(head, rows) {
  const widths = head.map((_, column) => Math.max(...[head, ...rows].map((row) => row[column].length)));
  const line = (row) => row.map((cell, column) => cell.padEnd(widths[column] + 2)).join('');
  return [faint(line(head)), ...rows.map(line)].map((text) => text.trimEnd());
}

/** Sets a text beside its lead, further lines under its first word. */
function hanging(lead, text) {
  const room = Math.max(Math.min(process.stdout.columns ?? widest, widest) - lead.length, 30);
  const lines = [''];
  for (const word of text.split(/\s+/)) {
    const last = lines.at(-1);
    if (last && last.length + 1 + word.length > room) lines.push(word);
    else lines[lines.length - 1] = last ? `${last} ${word}` : word;
  }
  return lead + lines.join(`\n${' '.repeat(lead.length)}`);
}
