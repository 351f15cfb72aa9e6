import temml from 'temml';

/** MathML of a TeX formula, made here on the server: the browser sets it without a script. */
function mathml(tex: string, displayMode: boolean): string {
  return temml.renderToString(tex, { displayMode, throwOnError: true });
}

/** A formula in a line of text. */
export function M({ children }: { children: string }) {
  // biome-ignore lint/security/noDangerouslySetInnerHtml: made of our own TeX
  return <span dangerouslySetInnerHTML={{ __html: mathml(children, false) }} />;
}

/** A formula on a line of its own; a long one scrolls in its frame, by keyboard too. */
export function Formula({ children }: { children: string }) {
  return (
    <div
      className="my-4 overflow-x-auto first:mt-0 last:mb-0 rounded border border-rule bg-sheet px-5 py-3"
      // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by keyboard
      tabIndex={0}
      // biome-ignore lint/security/noDangerouslySetInnerHtml: made of our own TeX
      dangerouslySetInnerHTML={{ __html: mathml(children, true) }}
    />
  );
}
