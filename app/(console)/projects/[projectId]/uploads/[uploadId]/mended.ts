import type { ProblemItem } from '@/openapi/schemas/problem';

/** An id for another try: st-7, st-7.2, st-7.3. */
export function nextClientId(clientId: string): string {
  const match = /^(.*)\.(\d+)$/.exec(clientId);
  return match ? `${match[1]}.${Number(match[2]) + 1}` : `${clientId}.2`;
}

/**
 * What is left to be sent: the document with its refused items alone, under an id of its own. A body that is no JSON
 * is given back as it is.
 */
export function leftOver(text: string, clientId: string | null, refused: readonly ProblemItem[]): string {
  let document: Record<string, unknown>;
  try {
    document = JSON.parse(text);
  } catch {
    return text;
  }
  if (typeof document !== 'object' || document === null || Array.isArray(document)) return text;
  const wanted = new Set(refused.map(({ pointer }) => pointer.split('/').slice(0, 3).join('/')));
  const ofItems = [...wanted].every((pointer) => /^\/\w+\/\d+$/.test(pointer));
  const entries = Object.entries(document).map(([name, value]) => [
    name,
    ofItems && Array.isArray(value) ? value.filter((_, i) => wanted.has(`/${name}/${i}`)) : value,
  ]);
  const left = Object.fromEntries(
    entries.filter(([, value]) => !(Array.isArray(value) && value.length === 0)),
  );
  if (clientId !== null) left.clientId = nextClientId(clientId);
  return JSON.stringify(left, null, 2);
}
