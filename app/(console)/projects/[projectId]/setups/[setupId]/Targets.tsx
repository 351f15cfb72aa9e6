'use client';

import { CONTROL_TONE } from '@/app/ui/controlState';
import { HubShape } from '@/app/ui/draw/HubShape';
import { ResidualScale } from '@/app/ui/draw/ResidualScale';
import { COORDINATE, fixed, signed, stated, unitSign } from '@/app/ui/numbers';
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

function partOf({ target, used, purpose }: Target): string {
  if (used) return ROLE.orient;
  if (target === null) return 'stray';
  return purpose === 'orient' ? 'left out' : ROLE[purpose];
}

export function Targets({ setup }: { setup: ShownSetup }) {
  const unit = unitSign(setup.units.length);
  const limit = (value: number) => stated(value, setup.units.length);
  const residual = (
    name: string,
    pick: (target: Target) => number | null,
    tolerance: number,
  ): Column<Target> => {
    const longest = Math.max(...setup.targets.map((target) => signed(pick(target) ?? 0, COORDINATE).length));
    return {
      name,
      unit,
      value: pick,
      cell: (target) => {
        const value = pick(target);
        if (value === null) return <span className="text-ink-third">none</span>;
        return <Residual value={value} tolerance={tolerance} digits={longest} />;
      },
    };
  };
  return (
    <section>
      <h2 className="mb-3 font-head text-[19px]">
        Targets{' '}
        <span className="font-text text-[13.5px] font-normal text-ink-second">
          residuals in {unit}; tolerance {limit(setup.tolerance.horizontal)} in plan and{' '}
          {limit(setup.tolerance.vertical)} in height
          <span className="max-md:hidden">, drawn as the band</span>
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
            cell: (target) => (
              <>
                {target.target === null ? (
                  <span className="text-ink-second">no control point ({target.shots.join(', ')})</span>
                ) : (
                  <span className="font-semibold whitespace-nowrap">{target.target}</span>
                )}
                <span className="block text-[12.5px] whitespace-nowrap text-ink-second md:hidden">
                  {partOf(target)}
                </span>
              </>
            ),
          },
          residual('Easting', (target) => target.residual.easting, setup.tolerance.horizontal),
          residual('Northing', (target) => target.residual.northing, setup.tolerance.horizontal),
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
            value: partOf,
          },
          {
            name: 'Control',
            value: (target) => target.status,
            cell: ({ status }) => (status ? <State tone={CONTROL_TONE[status]}>{status}</State> : ''),
          },
        ]}
      />
    </section>
  );
}

/** A residual with its ruled scale; without the scale, on a narrow screen, a struck hub says that it is beyond. */
function Residual({ value, tolerance, digits }: { value: number; tolerance: number; digits: number }) {
  const beyond = Math.abs(value) > tolerance;
  return (
    <span className={`inline-flex items-center gap-2 max-md:gap-1 ${beyond ? 'text-fail' : ''}`}>
      <span
        className="text-right font-medium whitespace-nowrap max-md:min-w-0!"
        style={{ minWidth: `${digits}ch` }}
      >
        {signed(value, COORDINATE)}
      </span>
      {beyond ? (
        <>
          <span className="sr-only">beyond</span>
          <span className="md:hidden">
            <HubShape shape="struck" size={11} />
          </span>
        </>
      ) : null}
      <span className="max-md:hidden">
        <ResidualScale value={value} tolerance={tolerance} />
      </span>
    </span>
  );
}
