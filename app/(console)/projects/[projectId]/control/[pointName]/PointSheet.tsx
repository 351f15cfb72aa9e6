'use client';

import Link from 'next/link';
import { AffectedList } from '@/app/ui/AffectedList';
import { CONTROL_TONE } from '@/app/ui/controlState';
import { useRead } from '@/app/ui/data/queries';
import { useCan } from '@/app/ui/data/whoami';
import { ResidualHistory } from '@/app/ui/draw/ResidualHistory';
import { Figure } from '@/app/ui/Figure';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { type Entry, Ledger } from '@/app/ui/Ledger';
import { Failure, Skeleton } from '@/app/ui/Notice';
import { COORDINATE, fixed, moment, signed, unitName, unitSign } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';
import type * as contracts from '@/openapi/contracts/control';
import { Health } from './Health';
import { Trust } from './Trust';

/** One point: what is known of it, what it showed in every setup, and whether it is trusted. */
export function PointSheet({ projectId, pointName }: { projectId: string; pointName: string }) {
  const params = { projectId, pointName };
  const history = useRead<typeof contracts.getControlPointHistory>(
    '/projects/{projectId}/control-points/{pointName}/history',
    { params },
  );
  const mayWrite = useCan('control:write');
  if (history.error) return <Failure error={history.error} retry={history.refetch} />;
  if (!history.data) return <Skeleton lines={8} />;
  const { versions, residuals, status, units } = history.data;
  const [now] = [...versions].sort((a, b) => b.version - a.version);
  const unit = unitSign(units.length);
  const length = (name: string, value: number | null, sigma: number): Entry => ({
    name,
    value: value === null ? 'none' : <Figure label={name} value={fixed(value, COORDINATE)} unit={unit} />,
    beside: value === null ? null : `± ${fixed(sigma, COORDINATE)}`,
  });
  const figure = (name: string, pick: (row: (typeof residuals)[number]) => number | null) => ({
    name,
    unit: units.length,
    figures: true,
    value: pick,
    cell: (row: (typeof residuals)[number]) => {
      const value = pick(row);
      return value === null ? <span className="text-ink-third">none</span> : signed(value, COORDINATE);
    },
  });
  return (
    <>
      <Crumb
        trail={[{ name: 'Control', href: `/projects/${projectId}/control` }, { name: pointName }]}
        note={unitName(units.length)}
      />
      <PageHead
        title={pointName}
        sub={`${now.kind}, version ${now.version}${now.description ? `, ${now.description}` : ''}`}
        aside={
          <div className="text-[19px]">
            <State tone={CONTROL_TONE[status]} size={22}>
              {status}
            </State>
          </div>
        }
      />
      <div className="grid gap-9 lg:grid-cols-[minmax(0,1.55fr)_minmax(280px,1fr)]">
        <div className="space-y-9">
          <section>
            <h2 className="mb-3 font-head text-[19px]">
              What it showed{' '}
              <span className="font-text text-[13.5px] font-normal text-ink-second">
                as shot minus as published, in {unit}
              </span>
            </h2>
            {residuals.length === 0 ? (
              <p className="text-ink-second">No setup has used it yet.</p>
            ) : (
              <div className="space-y-5">
                <ResidualHistory residuals={residuals} unit={unit} />
                <Table
                  caption={`Residuals of ${pointName}, setup by setup`}
                  file={`${pointName}-residuals`}
                  rows={residuals}
                  keyOf={(row) => `${row.setupId}${row.observedAt}`}
                  columns={[
                    {
                      name: 'Setup',
                      value: (row) => row.station,
                      cell: (row) => (
                        <Link
                          href={`/projects/${projectId}/setups/${row.setupId}`}
                          className="font-semibold text-ink"
                        >
                          {row.station}
                        </Link>
                      ),
                    },
                    {
                      name: 'Observed',
                      value: (row) => row.observedAt,
                      cell: (row) => moment(row.observedAt),
                    },
                    { name: 'Version', wide: true, figures: true, value: (row) => row.version },
                    figure('Easting', (row) => row.residual.easting),
                    figure('Northing', (row) => row.residual.northing),
                    figure('Elevation', (row) => row.residual.elevation),
                  ]}
                />
              </div>
            )}
          </section>
          <section>
            <h2 className="mb-3 font-head text-[19px]">
              Versions <span className="font-text text-[13.5px] font-normal text-ink-second">in {unit}</span>
            </h2>
            <Table
              caption={`Versions of ${pointName}`}
              rows={versions}
              keyOf={(version) => String(version.version)}
              columns={[
                { name: 'Version', value: (v) => v.version },
                {
                  name: 'Brought in',
                  value: (v) => v.createdAt,
                  cell: (v) => (
                    <>
                      {moment(v.createdAt)} <span className="text-ink-third">by {v.createdBy}</span>
                    </>
                  ),
                },
                {
                  name: 'Easting',
                  figures: true,
                  value: (v) => v.easting,
                  cell: (v) => fixed(v.easting, COORDINATE),
                },
                {
                  name: 'Northing',
                  figures: true,
                  value: (v) => v.northing,
                  cell: (v) => fixed(v.northing, COORDINATE),
                },
                {
                  name: 'Elevation',
                  figures: true,
                  value: (v) => v.elevation,
                  cell: (v) => (v.elevation === null ? 'none' : fixed(v.elevation, COORDINATE)),
                },
              ]}
            />
          </section>
          {status === 'trusted' ? null : <AffectedList projectId={projectId} of={{ pointName }} />}
        </div>
        <div className="space-y-9">
          <Ledger
            title="Published"
            note={`in ${unit}, ± one standard deviation, ${now.sigmaSource === 'stated' ? 'as stated' : 'the project’s default'}`}
            entries={[
              length('Easting', now.easting, now.sigma.horizontal),
              length('Northing', now.northing, now.sigma.horizontal),
              length('Elevation', now.elevation, now.sigma.vertical),
            ]}
          />
          <Health projectId={projectId} pointName={pointName} />
          {mayWrite ? <Trust projectId={projectId} pointName={pointName} status={status} /> : null}
        </div>
      </div>
    </>
  );
}
