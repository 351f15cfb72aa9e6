'use client';

import type * as z from 'zod';
import { useRead } from '@/app/ui/data/queries';
import { SetupPlan } from '@/app/ui/draw/SetupPlan';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Failure, Skeleton } from '@/app/ui/Notice';
import { moment, unitName } from '@/app/ui/numbers';
import { Radio } from '@/app/ui/Radio';
import { ReasonList } from '@/app/ui/ReasonList';
import { Stamp } from '@/app/ui/Stamp';
import type * as contracts from '@/openapi/contracts/setups';
import type { Setup } from '@/openapi/schemas/setup';
import { Acts } from './Acts';
import { Checks } from './Checks';
import { Fit, Standing } from './Ledgers';
import { Provenance } from './Provenance';
import { Targets } from './Targets';

export type ShownSetup = z.output<typeof Setup>;

export function SetupSheet({ projectId, setupId }: { projectId: string; setupId: string }) {
  const setups = `/projects/${projectId}/setups`;
  const { data, error, refetch } = useRead<typeof contracts.getSetup>(
    '/projects/{projectId}/setups/{setupId}',
    {
      params: { projectId, setupId },
    },
  );
  if (error) return <Failure error={error} retry={refetch} />;
  if (!data) return <Skeleton lines={8} />;
  const marks = data.targets.filter((target) => target.used).length;
  return (
    <>
      <Crumb
        trail={[{ name: 'Setups', href: setups }, { name: data.station }]}
        note={`${unitName(data.units.length)} · site grid, ground distances`}
      />
      <PageHead
        title={data.station}
        sub={
          <>
            {data.method === 'resection' ? 'Resection' : data.method} on {marks} targets with{' '}
            {data.instrument}, {moment(data.observedAt)}, posted by{' '}
            <code className="font-code text-[13px]">{data.submittedBy}</code>
            {data.status === 'computed' ? null : `, ${data.status}`}
          </>
        }
        aside={<Stamp verdict={data.verdict} reason={stampReason(data)} />}
      >
        <Radio>{data.radio}</Radio>
      </PageHead>
      <div className="grid gap-9 lg:grid-cols-[minmax(0,1.55fr)_minmax(280px,1fr)]">
        <SetupPlan setup={data} />
        <div className="space-y-7">
          <Standing setup={data} />
          <Fit setup={data} />
        </div>
      </div>
      <div className="mt-9 space-y-9">
        <Targets setup={data} />
        <div className="grid gap-9 lg:grid-cols-[minmax(0,1.55fr)_minmax(280px,1fr)]">
          <div className="space-y-9">
            <ReasonList reasons={data.reasons} notes={data.notes} />
            <Checks setup={data} />
            <Provenance setup={data} projectId={projectId} />
          </div>
          <Acts setup={data} projectId={projectId} />
        </div>
      </div>
    </>
  );
}

/** The first reason, short enough for a stamp. */
function stampReason({ verdict, toleranceClass, reasons }: ShownSetup): string {
  if (verdict === 'pass') return `for ${toleranceClass}`;
  const [first] = reasons;
  const sentence = first?.text.split(/[;:.](?:\s|$)/)[0] ?? '';
  return sentence.length > 64 ? `${sentence.slice(0, 62)}…` : sentence;
}
