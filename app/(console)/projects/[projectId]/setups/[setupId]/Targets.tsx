'use client';

import { CONTROL_TONE } from '@/app/ui/controlState';
import { ResidualScale } from '@/app/ui/draw/ResidualScale';
import { COORDINATE, fixed, signed, unitSign } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { type Column, Table } from '@/app/ui/table/Table';
import type { ShownSetup } from './SetupSheet';

type Target = ShownSetup['targets'][number];

function largestW({ observations }: Target): number | null {
  const all = observations.flatMap(({ standardised }) =>
    standardised === null ? [] : Math.abs(standardised),
  );
  return all.length > 0 ? Math.max(...all) : null;
}

const ROLE = { orient: 'in the fit', check: 'check', closing: 'closing check' } as const;

export function Targets({ setup }: { setup: ShownSetup }) {
  const unit = unitSign(setup.units.length);
  const residual = (
    name: string,
    pick: (target: Target) => number | null,
    tolerance: number,
  ): Column<Target> => ({
    name,
    unit,
    value: pick,
    cell: (target) => {
      const value = pick(target);
      if (value === null) return <span className="text-ink-third">none</span>;
      return (
        <span className="inline-flex items-center gap-2">
          <span className={`font-medium whitespace-nowrap ${Math.abs(value) > tolerance ? 'text-fail' : ''}`}>
            {signed(value, COORDINATE)}
          </span>
          <span className="max-md:hidden">
            <ResidualScale value={value} tolerance={tolerance} />
          </span>
        </span>
      );
    },
  });
  return (
    <section>
      <h2 className="mb-3 font-head text-[19px]">
        Targets{' '}
        <span className="font-text text-[13.5px] font-normal text-ink-second">
          residuals in {unit}; the band is the tolerance, {fixed(setup.tolerance.horizontal, COORDINATE)} in
          plan and {fixed(setup.tolerance.vertical, COORDINATE)} in height
        </span>
      </h2>
      <Table
        caption="Targets with their residuals"
        file={`${setup.station}-targets`}
        rows={setup.targets}
        keyOf={(target) => `${target.purpose}${target.target}${target.shots.join()}`}
        columns={[
          {
            name: 'Target',
            value: (target) => target.target,
            cell: (target) => <span className="font-semibold">{target.target}</span>,
          },
          residual('Northing', (target) => target.residual.northing, setup.tolerance.horizontal),
          residual('Easting', (target) => target.residual.easting, setup.tolerance.horizontal),
          residual('Elevation', (target) => target.residual.elevation, setup.tolerance.vertical),
          {
            name: 'Largest w',
            figures: true,
            wide: true,
            value: largestW,
            cell: (target) => {
              const w = largestW(target);
              if (w === null) return '';
              return <span className={w > 3.29 ? 'text-fail' : ''}>{fixed(w, 1)}</span>;
            },
          },
          {
            name: 'Without it',
            unit,
            figures: true,
            wide: true,
            value: (target) => target.without?.horizontal ?? null,
            cell: (target) =>
              target.used
                ? target.without
                  ? `moves ${fixed(target.without.horizontal, COORDINATE)}`
                  : 'cannot do without'
                : '',
          },
          {
            name: 'Part',
            wide: true,
            value: (target) =>
              target.used ? ROLE.orient : target.purpose === 'orient' ? 'left out' : ROLE[target.purpose],
          },
          {
            name: 'Control',
            value: (target) => target.status,
            cell: (target) => <State tone={CONTROL_TONE[target.status]}>{target.status}</State>,
          },
        ]}
      />
    </section>
  );
}
