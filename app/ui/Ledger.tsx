import { Fragment, type ReactNode } from 'react';

export interface Entry {
  name: string;
  value: ReactNode;
  /** Uncertainty or unit, in grey beside it. */
  beside?: ReactNode;
}

/** Figures in a column, what is uncertain about them beside. */
export function Ledger({
  title,
  note,
  entries,
}: {
  title: string;
  note?: string;
  entries: readonly Entry[];
}) {
  return (
    <section>
      <h2 className="mb-2 font-head text-[19px]">
        {title}{' '}
        {note ? <span className="font-text text-[13.5px] font-normal text-ink-second">{note}</span> : null}
      </h2>
      <dl className="grid grid-cols-[1fr_auto_auto]">
        {entries.map(({ name, value, beside }) => (
          <Fragment key={name}>
            <dt className="border-b border-rule py-2 text-ink-second">{name}</dt>
            <dd className="border-b border-rule py-2 pl-4 text-right font-medium">{value}</dd>
            <dd className="border-b border-rule py-2 pl-4 text-right text-ink-third">{beside}</dd>
          </Fragment>
        ))}
      </dl>
    </section>
  );
}
