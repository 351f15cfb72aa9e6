import type { ReactNode } from 'react';

/** A part of a method: its heading in the margin, what it says beside it. */
export function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="grid gap-x-8 gap-y-2 border-t border-rule py-6 md:grid-cols-[190px_minmax(0,1fr)]">
      <h2 className="font-head text-[19px] leading-snug">{title}</h2>
      <div className="max-w-[68ch] min-w-0 space-y-3">{children}</div>
    </section>
  );
}

/** Findings, assumptions or limits, one a line. */
export function Points({ children }: { children: ReactNode[] }) {
  return (
    <ul className="space-y-2">
      {children.map((child, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: the list never changes
        <li key={i} className="border-l-2 border-rule-strong pl-3.5">
          {child}
        </li>
      ))}
    </ul>
  );
}

export interface Row {
  what: ReactNode;
  figure: ReactNode;
  note?: ReactNode;
}

/** Figures that the computation uses, taken from it. */
export function Figures({ caption, rows }: { caption: string; rows: readonly Row[] }) {
  return (
    <table className="w-full border-collapse text-left">
      <caption className="pb-1.5 text-left font-head text-[15px] text-ink-second">{caption}</caption>
      <tbody>
        {rows.map(({ what, figure, note }, i) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: the list never changes
          <tr key={i} className="border-t border-rule align-baseline">
            <th scope="row" className="py-1.5 pr-4 font-normal">
              {what}
              {note ? <span className="block text-[13.5px] text-ink-third">{note}</span> : null}
            </th>
            <td className="py-1.5 text-right font-medium whitespace-nowrap">{figure}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
