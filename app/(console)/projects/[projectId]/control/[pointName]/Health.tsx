'use client';

import { useRead } from '@/app/ui/data/queries';
import { Figure } from '@/app/ui/Figure';
import { type Entry, Ledger } from '@/app/ui/Ledger';
import { Failure, Skeleton } from '@/app/ui/Notice';
import { COORDINATE, fixed, moment, signed, unitSign } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import type * as contracts from '@/openapi/contracts/control';

const FINDING = {
  steady: { tone: 'pass', word: 'in its place' },
  moved: { tone: 'fail', word: 'has moved' },
  doubtful: { tone: 'hold', word: 'in doubt' },
  unknown: { tone: 'plain', word: 'not known' },
} as const;

/** What all setups together show of a point, and who said how far it is to be trusted. */
export function Health({ projectId, pointName }: { projectId: string; pointName: string }) {
  const point = useRead<typeof contracts.getControlPoint>(
    '/projects/{projectId}/control-points/{pointName}',
    { params: { projectId, pointName } },
  );
  if (point.error) return <Failure error={point.error} retry={point.refetch} />;
  if (!point.data) return <Skeleton lines={4} />;
  const { health, statusAct, units } = point.data;
  const { displacement } = health;
  const { tone, word } = FINDING[health.finding];
  const unit = unitSign(units.length);
  const moved = (name: string, value: number | null, sigma: number | null): Entry[] =>
    value === null || sigma === null
      ? []
      : [
          {
            name,
            value: <Figure label={`${name} displacement`} value={signed(value, COORDINATE)} unit={unit} />,
            beside: `± ${fixed(sigma, COORDINATE)}`,
          },
        ];
  return (
    <section className="space-y-4">
      <h2 className="font-head text-[19px]">Does it stand?</h2>
      <div>
        <p className="font-medium">
          <State tone={tone}>{word}</State>
        </p>
        <p className="mt-2">{health.text}</p>
        {health.action ? <p className="mt-1 text-ink-second">{health.action}</p> : null}
      </div>
      {displacement ? (
        <Ledger
          title="Where it stands"
          note={`minus where it was published, in ${unit}, ± one standard deviation`}
          entries={[
            ...moved('Easting', displacement.easting, displacement.standardDeviations.easting),
            ...moved('Northing', displacement.northing, displacement.standardDeviations.northing),
            ...moved('Elevation', displacement.elevation, displacement.standardDeviations.elevation),
          ]}
        />
      ) : null}
      {statusAct ? (
        <p className="text-[13.5px] text-ink-second">
          Set {moment(statusAct.at)} by {statusAct.by.kind === 'job' ? 'the hub itself' : statusAct.by.name}:{' '}
          {statusAct.text}
        </p>
      ) : null}
    </section>
  );
}
