'use client';

import { worstOutcome } from '@/app/ui/checkOutcome';
import { COORDINATE, fixed, moment, signed, unitSign } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';
import type { ShownSetup } from './SetupSheet';

/** Checks over time, the oldest first. */
export function Checks({ setup }: { setup: ShownSetup }) {
  const unit = unitSign(setup.units.length);
  const rows = setup.checks.flatMap((check) => check.targets.map((target) => ({ check, target })));
  const drifts = setup.checks.flatMap(({ id, observedAt, drift }) =>
    drift === null ? [] : [{ id, observedAt, drift }],
  );
  return (
    <section>
      <h2 className="mb-3 font-head text-[19px]">
        Checks{' '}
        <span className="font-text text-[13.5px] font-normal text-ink-second">
          as shot minus as published, in {unit}, ± one standard deviation
        </span>
      </h2>
      {rows.length === 0 ? (
        <p className="text-ink-second">No mark outside the fit was shot, and nothing since the setup.</p>
      ) : (
        <Table
          caption="Checks over time"
          rows={rows}
          keyOf={({ check, target }) => `${check.id}${target.target}`}
          columns={[
            {
              name: 'Shot',
              value: ({ check }) => check.observedAt,
              cell: ({ check }) => moment(check.observedAt),
            },
            {
              name: 'Mark',
              value: ({ target }) => target.target,
              cell: ({ target }) => (
                <>
                  <span className="font-semibold">{target.target}</span>{' '}
                  <span className="text-ink-third">
                    {target.role === 'drift' ? 'of the fit: drift' : 'independent'}
                  </span>
                </>
              ),
            },
            {
              name: `In plan`,
              unit,
              figures: true,
              value: ({ target }) => Math.hypot(target.difference.easting, target.difference.northing),
              cell: ({ target }) =>
                `${fixed(Math.hypot(target.difference.easting, target.difference.northing), COORDINATE)} ± ${fixed(target.uncertainty.horizontal, COORDINATE)}`,
            },
            {
              name: 'In height',
              unit,
              figures: true,
              value: ({ target }) => target.difference.elevation,
              cell: ({ target: { difference, uncertainty } }) =>
                difference.elevation === null
                  ? 'none'
                  : `${signed(difference.elevation, COORDINATE)} ± ${fixed(uncertainty.vertical ?? 0, COORDINATE)}`,
            },
            {
              name: 'Outcome',
              value: ({ target }) => `${target.horizontal} ${target.vertical ?? ''}`,
              cell: ({ target }) => {
                const { tone, word } = worstOutcome([target.horizontal, target.vertical]);
                return <State tone={tone}>{word}</State>;
              },
            },
          ]}
        />
      )}
      {drifts.length === 0 ? null : (
        <ul className="mt-3">
          {drifts.map(({ id, observedAt, drift }) => (
            <li key={id} className="border-b border-rule py-3">
              <p className={drift.significant ? 'font-semibold' : 'text-ink-second'}>
                {moment(observedAt)}. {drift.text}
              </p>
              {drift.action ? <p className="text-ink-second">{drift.action}</p> : null}
            </li>
          ))}
        </ul>
      )}
    </section>
  );
}
