'use client';

import Link from 'next/link';
import type * as z from 'zod';
import { CONTROL_TONE } from '@/app/ui/controlState';
import { COORDINATE, fixed, unitSign } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { type Column, Table } from '@/app/ui/table/Table';
import type { ControlPoint } from '@/openapi/schemas/control';

type Point = z.output<typeof ControlPoint>;

interface Props {
  projectId: string;
  points: readonly Point[];
  more: { has: boolean; busy: boolean; read: () => void };
}

export function Registry({ projectId, points, more }: Props) {
  const unit = points[0].units.length;
  const length = (name: string, pick: (point: Point) => number | null, wide = false): Column<Point> => ({
    name,
    unit,
    figures: true,
    wide,
    value: pick,
    cell: (point) => {
      const value = pick(point);
      return value === null ? <span className="text-ink-third">none</span> : fixed(value, COORDINATE);
    },
  });
  return (
    <section>
      <h2 className="mb-3 font-head text-[19px]">
        Registry{' '}
        <span className="font-text text-[13.5px] font-normal text-ink-second">in {unitSign(unit)}</span>
      </h2>
      <Table
        caption="Control points"
        file="control"
        rows={points}
        keyOf={(point) => point.name}
        more={more}
        columns={[
          {
            name: 'Point',
            value: (point) => point.name,
            cell: (point) => (
              <Link
                href={`/projects/${projectId}/control/${encodeURIComponent(point.name)}`}
                className="font-semibold text-ink"
              >
                {point.name}
              </Link>
            ),
          },
          { name: 'Kind', wide: true, value: (point) => point.kind },
          length('Easting', (point) => point.easting),
          length('Northing', (point) => point.northing),
          length('Elevation', (point) => point.elevation),
          length('± in plan', (point) => point.sigma.horizontal, true),
          length('± in height', (point) => point.sigma.vertical, true),
          {
            name: 'Version',
            wide: true,
            figures: true,
            value: (point) => point.version,
          },
          {
            name: 'State',
            value: (point) => point.status,
            cell: (point) => <State tone={CONTROL_TONE[point.status]}>{point.status}</State>,
          },
          {
            name: 'Why',
            wide: true,
            value: (point) => (point.status === 'trusted' ? null : (point.statusAct?.text ?? null)),
            cell: (point) =>
              point.status === 'trusted' || point.statusAct === null ? null : (
                <span className="block max-w-[30rem] text-ink-second">{point.statusAct.text}</span>
              ),
          },
          { name: 'Description', wide: true, value: (point) => point.description },
        ]}
      />
    </section>
  );
}
