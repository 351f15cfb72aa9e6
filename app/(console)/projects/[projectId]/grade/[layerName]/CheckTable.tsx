'use client';

import type { GradeShot } from '@/app/ui/draw/deviation';
import { COORDINATE, fixed, moment, signed, unitSign } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';

interface Props {
  checks: readonly GradeShot[];
  layerName: string;
  chosen: string | null;
  choose: (id: string, button: HTMLElement) => void;
  more: { has: boolean; busy: boolean; read: () => void };
}

/** Every check with its label; a press on its name shows it in the plan and beside it. */
export function CheckTable({ checks, layerName, chosen, choose, more }: Props) {
  const unit = unitSign(checks[0].units.length);
  const length = (name: string, pick: (check: GradeShot) => number | null) => ({
    name,
    unit: checks[0].units.length,
    figures: true,
    wide: true,
    value: pick,
    cell: (check: GradeShot) => {
      const value = pick(check);
      return value === null ? <span className="text-ink-third">none</span> : fixed(value, COORDINATE);
    },
  });
  return (
    <section>
      <h2 className="mb-3 font-head text-[19px]">
        Checks <span className="font-text text-[13.5px] font-normal text-ink-second">heights in {unit}</span>
      </h2>
      <Table
        caption="Grade checks"
        file={layerName}
        rows={checks}
        keyOf={(check) => check.id}
        more={more}
        columns={[
          {
            name: 'Shot',
            value: (check) => check.clientId,
            cell: (check) => (
              <button
                type="button"
                aria-pressed={check.id === chosen}
                onClick={(event) => choose(check.id, event.currentTarget)}
                className="cursor-pointer font-semibold underline aria-pressed:text-mark"
              >
                {check.clientId}
              </button>
            ),
          },
          {
            name: 'Taken',
            wide: true,
            value: (check) => check.observedAt,
            cell: (check) => moment(check.observedAt),
          },
          length('Easting', (check) => check.point.easting),
          length('Northing', (check) => check.point.northing),
          length('Ground', (check) => check.point.elevation),
          length('Layer', (check) => check.layerElevation),
          {
            name: 'Label',
            value: (check) => check.label,
            cell: (check) => (
              <span className="font-semibold whitespace-nowrap">{check.label ?? 'off the surface'}</span>
            ),
          },
          {
            name: 'Deviation',
            unit: checks[0].units.length,
            figures: true,
            value: (check) => check.deviation,
            cell: (check) =>
              check.deviation === null ? (
                ''
              ) : (
                <span className="whitespace-nowrap">
                  {signed(check.deviation, COORDINATE)}{' '}
                  {check.standardDeviation === null ? null : (
                    <span className="font-normal text-ink-third">
                      ± {fixed(check.standardDeviation, COORDINATE)}
                    </span>
                  )}
                </span>
              ),
          },
          {
            name: 'Verdict',
            value: (check) => check.verdict,
            cell: (check) => <State tone={check.verdict}>{check.verdict}</State>,
          },
        ]}
      />
    </section>
  );
}
