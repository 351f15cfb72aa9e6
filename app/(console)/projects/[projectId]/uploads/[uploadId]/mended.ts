import { applyEdits, format, type Node } from 'jsonc-parser';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { treeOf } from './places';

/** An id for another try: st-7, st-7.2, st-7.3. */
export function nextClientId(clientId: string): string {
  const match = /^(.*)\.(\d+)$/.exec(clientId);
  return match ? `${match[1]}.${Number(match[2]) + 1}` : `${clientId}.2`;
}

/**
 * What is left to be sent: the document with its refused items alone, under an id of its own. Every item is written as
 * it came: of a key that stands twice both are left in, and a number keeps its digits. A body that is no JSON is given
 * back as it is.
 */
export function leftOver(text: string, clientId: string | null, refused: readonly ProblemItem[]): string {
  const tree = isJson(text) ? treeOf(text) : undefined;
  if (tree?.type !== 'object') return text;
  const wanted = new Set(refused.map(({ pointer }) => pointer.split('/').slice(0, 3).join('/')));
  const ofItems = [...wanted].every((pointer) => /^\/\w+\/\d+$/.test(pointer));
  const raw = ({ offset, length }: Node) => text.slice(offset, offset + length);
  const written = (tree.children ?? []).flatMap(({ children }) => {
    const [key, value] = children ?? [];
    if (!key || !value) return [];
    if (key.value === 'clientId' && clientId !== null)
      return [`${raw(key)}: ${JSON.stringify(nextClientId(clientId))}`];
    if (value.type !== 'array') return [`${raw(key)}: ${raw(value)}`];
    const items = (value.children ?? []).filter((_, i) => !ofItems || wanted.has(`/${key.value}/${i}`));
    return items.length === 0 ? [] : [`${raw(key)}: [${items.map(raw).join()}]`];
  });
  const left = `{${written.join()}}`;
  return applyEdits(left, format(left, undefined, { tabSize: 2, insertSpaces: true, eol: '\n' }));
}

/** The tree alone would pass over what is broken. */
function isJson(text: string): boolean {
  try {
    JSON.parse(text);
    return true;
  } catch {
    return false;
  }
}

/** Whether somebody has to choose between values of one key before the hub can take what is left. */
export function isAmbiguous(refused: readonly ProblemItem[]): boolean {
  return refused.some(({ code }) => code === 'duplicate_key');
}
