'use client';

import type * as z from 'zod';
import { AffectedList } from '@/app/ui/AffectedList';
import { useRead } from '@/app/ui/data/queries';
import { SetupPlan } from '@/app/ui/draw/SetupPlan';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Failure, Skeleton } from '@/app/ui/Notice';
import { moment, unitName } from '@/app/ui/numbers';
import { Radio } from '@/app/ui/Radio';
import { ReasonList } from '@/app/ui/ReasonList';
import type * as contracts from '@/openapi/contracts/setups';
import type { Setup } from '@/openapi/schemas/setup';
import { Acts } from './Acts';
import { Checks } from './Checks';
import { Explanations } from './Explanations';
import { Identification } from './Identification';
import { Backsights, Fit, Standing } from './Ledgers';
import { Provenance } from './Provenance';
import { SetupStamp } from './SetupStamp';
import { Targets } from './Targets';

export type ShownSetup = z.output<typeof Setup>;

const METHOD: Record<ShownSetup['method'], string> = {
  resection: 'Resection',
  identify: 'Identified resection',
  backsight: 'Backsights',
};

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
  // What hangs on it matters once nobody should work from it any more.
  const hangs = data.status === 'withdrawn' || (data.verdict === 'fail' && data.release !== null);
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
            {METHOD[data.method]} on {marks} targets with {data.instrument}, {moment(data.observedAt)}, posted
            by <code className="font-code text-[13px]">{data.submittedBy}</code>
          </>
        }
        aside={<SetupStamp setup={data} projectId={projectId} />}
      >
        <Radio>{data.radio}</Radio>
      </PageHead>
      <div className="grid gap-9 lg:grid-cols-[minmax(0,1.55fr)_minmax(280px,1fr)]">
        <SetupPlan setup={data} />
        <div className="space-y-7">
          <Standing setup={data} />
          <Backsights setup={data} />
          <Fit setup={data} />
        </div>
      </div>
      <div className="mt-9 space-y-9">
        <Targets setup={data} />
        <div className="grid gap-9 lg:grid-cols-[minmax(0,1.55fr)_minmax(280px,1fr)]">
          <div className="space-y-9">
            <Identification setup={data} />
            <Explanations setup={data} />
            <ReasonList reasons={data.reasons} notes={data.notes} />
            <Checks setup={data} />
            {hangs ? <AffectedList projectId={projectId} of={{ setupId: data.id }} /> : null}
            <Provenance setup={data} projectId={projectId} />
          </div>
          <Acts setup={data} projectId={projectId} />
        </div>
      </div>
    </>
  );
}
