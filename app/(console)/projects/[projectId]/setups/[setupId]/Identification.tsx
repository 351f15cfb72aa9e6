'use client';

import { COORDINATE, fixed, unitSign } from '@/app/ui/numbers';
import { type Column, Table } from '@/app/ui/table/Table';
import type { ShownSetup } from './SetupSheet';

type Found = NonNullable<ShownSetup['identification']>;
type Candidate = Found['candidates'][number];

/** How the targets of unnamed shots were found and, where several assignments fit, what each would make of them. */
export function Identification({ setup }: { setup: ShownSetup }) {
  const { identification } = setup;
  if (identification === null) return null;
  const { ambiguous, matched, reflectors } = identification;
  return (
    <section>
      <h2 className="mb-1 font-head text-[19px]">Targets found by their geometry</h2>
      <p className="mb-3">
        {matched} of {reflectors} reflectors stand on control.{' '}
        {ambiguous
          ? 'More than this one assignment may be true; the figures of this page are the first one’s.'
          : 'No other assignment comes near.'}
      </p>
      {ambiguous ? <Candidates setup={setup} found={identification} /> : null}
    </section>
  );
}

function Candidates({ setup, found: { candidates, more, deciding } }: { setup: ShownSetup; found: Found }) {
  const unit = unitSign(setup.units.length);
  const ordinal = (candidate: Candidate) => candidates.indexOf(candidate) + 1;
  const reading = (candidate: Candidate) => deciding?.readings[ordinal(candidate) - 1];
  const columns: Column<Candidate>[] = [
    { name: 'Stand', value: ordinal },
    {
      name: 'Easting',
      unit,
      figures: true,
      value: ({ position }) => position.easting,
      cell: ({ position }) => fixed(position.easting, COORDINATE),
    },
    {
      name: 'Northing',
      unit,
      figures: true,
      value: ({ position }) => position.northing,
      cell: ({ position }) => fixed(position.northing, COORDINATE),
    },
    {
      name: 'On control',
      wide: true,
      value: ({ matched }) => matched,
      cell: ({ targets }) => targets.flatMap(({ target }) => target ?? []).join(', '),
    },
  ];
  if (deciding) {
    columns.push({
      name: `${deciding.target} would be at`,
      value: (candidate) => reading(candidate)?.horizontal ?? null,
      cell: (candidate) => {
        const at = reading(candidate);
        return at ? `${fixed(at.horizontal, 2)}°, ${fixed(at.horizontalDistance, 1)} ${unit}` : '';
      },
    });
  }
  return (
    <>
      <Table
        caption="Stands that fit the shots"
        rows={candidates}
        keyOf={(candidate) => String(ordinal(candidate))}
        columns={columns}
      />
      {more ? <p className="mt-2 text-ink-second">Others fit as well; these are the likeliest.</p> : null}
    </>
  );
}
