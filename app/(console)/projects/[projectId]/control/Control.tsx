'use client';

import { useState } from 'react';
import { CONTROL_MEANING, CONTROL_TONE, type ControlState } from '@/app/ui/controlState';
import { useAllPages, usePages, useRead } from '@/app/ui/data/queries';
import { useCan } from '@/app/ui/data/whoami';
import { ControlPlan } from '@/app/ui/draw/ControlPlan';
import { Select } from '@/app/ui/form/Select';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Ledger } from '@/app/ui/Ledger';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { fixed, unitName } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import type * as controlContracts from '@/openapi/contracts/control';
import type * as projectContracts from '@/openapi/contracts/projects';
import { ImportControl } from './ImportControl';
import { Registry } from './Registry';

const STATES = Object.keys(CONTROL_TONE) as ControlState[];
/** Beyond this many points the first are drawn and counted, and the page says so. */
const MOST_COUNTED = 2000;

export function Control({ projectId }: { projectId: string }) {
  const [status, setStatus] = useState<ControlState | ''>('');
  const all = useAllPages<typeof controlContracts.listControlPoints>(
    '/projects/{projectId}/control-points',
    { params: { projectId }, query: { limit: 200 } },
    MOST_COUNTED,
  );
  const project = useRead<typeof projectContracts.getProject>('/projects/{projectId}', {
    params: { projectId },
  });
  const list = usePages<typeof controlContracts.listControlPoints>('/projects/{projectId}/control-points', {
    params: { projectId },
    query: { status: status || undefined, limit: 200 },
  });
  const mayWrite = useCan('control:write');
  const error = all.error ?? list.error ?? project.error;
  return (
    <>
      <Crumb
        trail={[{ name: 'Control' }]}
        note={project.data ? `${unitName(project.data.lengthUnit)} · site grid` : undefined}
      />
      <PageHead title="Control" sub="Known points, with the trust they deserve. None is ever deleted." />
      {error ? (
        <Failure error={error} retry={() => void [all, list, project].map((query) => query.refetch())} />
      ) : list.isPending || !project.data ? (
        <Skeleton lines={8} />
      ) : (
        <div className="space-y-10">
          {list.rows.length === 0 && !status ? (
            <Empty title="No control yet">
              {mayWrite
                ? 'Drop a CSV file below, or post points with an API key.'
                : 'A surveyor brings it in.'}
            </Empty>
          ) : (
            <>
              <div className="grid items-start gap-9 lg:grid-cols-[minmax(0,1.9fr)_minmax(240px,1fr)]">
                {list.rows.length > 0 ? <ControlPlan marks={list.rows} /> : <div />}
                <div className="space-y-6">
                  <Ledger
                    title="How far it is trusted"
                    note={all.hasNextPage ? `of the first ${fixed(all.rows.length, 0)} points` : undefined}
                    entries={STATES.map((state) => ({
                      name: CONTROL_MEANING[state],
                      value: <State tone={CONTROL_TONE[state]}>{state}</State>,
                      beside: all.rows.filter((point) => point.status === state).length,
                    }))}
                  />
                  <div className="print:hidden">
                    <Select
                      label="Show"
                      value={status}
                      onChange={(event) => setStatus(event.target.value as ControlState | '')}
                    >
                      <option value="">all</option>
                      {STATES.map((state) => (
                        <option key={state}>{state}</option>
                      ))}
                    </Select>
                  </div>
                </div>
              </div>
              {list.rows.length === 0 ? (
                <Empty title={`No point is ${status}`} />
              ) : (
                <Registry
                  projectId={projectId}
                  points={list.rows}
                  more={{ has: list.hasNextPage, busy: list.isFetchingNextPage, read: list.fetchNextPage }}
                />
              )}
            </>
          )}
          {mayWrite ? <ImportControl projectId={projectId} projectUnit={project.data.lengthUnit} /> : null}
        </div>
      )}
    </>
  );
}
