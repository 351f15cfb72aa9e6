import { findNodeAtLocation, type Node, parseTree } from 'jsonc-parser';

/** Characters and lines shown on either side of a place. */
const CHARACTERS = 260;
const LINES = 4;

/** A place in a text, with what stands around it. */
export interface Place {
  line: number;
  before: string;
  marked: string;
  after: string;
}

/**
 * Finds what a JSON pointer names; where that is missing, the nearest thing around it that is there.
 *
 * @returns null where the text is no JSON at all
 */
export function findPlace(text: string, tree: Node | undefined, pointer: string): Place | null {
  if (!tree) return null;
  const steps = pointer
    .split('/')
    .slice(1)
    .map((step) => step.replaceAll('~1', '/').replaceAll('~0', '~'));
  let node = tree;
  let whole = true;
  for (const step of steps) {
    const next = findNodeAtLocation(node, [node.type === 'array' ? Number(step) : step]);
    if (!next) {
      whole = false;
      break;
    }
    node = next;
  }
  // A value is shown with its key; of what lacks something only the beginning is marked.
  const shown = node.parent?.type === 'property' ? node.parent : node;
  const end = shown.offset + shown.length;
  const firstLine = text.indexOf('\n', shown.offset);
  const long = !whole || shown.length > CHARACTERS;
  const cut = firstLine === -1 ? shown.offset + 60 : Math.min(firstLine, shown.offset + 60);
  return around(text, shown.offset, long ? Math.min(end, cut) : end);
}

export function treeOf(text: string): Node | undefined {
  return parseTree(text, [], { disallowComments: true });
}

function around(text: string, start: number, end: number): Place {
  let from = start;
  for (let lines = 0; from > 0 && start - from < CHARACTERS; from--) {
    if (text[from - 1] === '\n' && ++lines > LINES) break;
  }
  let to = end;
  for (let lines = 0; to < text.length && to - end < CHARACTERS; to++) {
    if (text[to] === '\n' && ++lines > LINES) break;
  }
  return {
    line: text.slice(0, start).split('\n').length,
    before: `${from > 0 ? '… ' : ''}${text.slice(from, start)}`,
    marked: text.slice(start, end),
    after: `${text.slice(end, to)}${to < text.length ? ' …' : ''}`,
  };
}
