'use client';

import { useRef, useState } from 'react';
import { bringIntoView } from '@/app/ui/bringIntoView';
import { useAllPages, useRead } from '@/app/ui/data/queries';
import { DeviationPlan } from '@/app/ui/draw/DeviationPlan';
import { Histogram } from '@/app/ui/draw/Histogram';
import { type Fact, Facts } from '@/app/ui/Facts';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { acceptedBy, allowed, liesAt } from '@/app/ui/layerWords';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { fixed, signed, unitName, unitSign } from '@/app/ui/numbers';
import { Radio } from '@/app/ui/Radio';
import { ReasonList } from '@/app/ui/ReasonList';
import { Stamp } from '@/app/ui/Stamp';
import type { AnswerOf } from '@/openapi/contract';
import type * as designContracts from '@/openapi/contracts/design';
import type * as gradeContracts from '@/openapi/contracts/grade';
import { CheckTable } from './CheckTable';
import { OneCheck } from './OneCheck';

type Summary = AnswerOf<typeof designContracts.getLayerSummary>;

/** Beyond this many checks the newest are drawn, and the page says so. */
const MOST_DRAWN = 2000;
const STAMP = { pass: 'Accepted', hold: 'Not yet', fail: 'Not accepted' } as const;

export function LayerSheet({ projectId, layerName }: { projectId: string; layerName: string }) {
  const params = { projectId, layerName };
  const layer = useRead<typeof designContracts.getLayer>('/projects/{projectId}/layers/{layerName}', {
    params,
  });
  const summary = useRead<typeof designContracts.getLayerSummary>(
    '/projects/{projectId}/layers/{layerName}/summary',
    { params },
  );
  const list = useAllPages<typeof gradeContracts.listGradeChecks>(
    '/projects/{projectId}/grade-checks',
    { params: { projectId }, query: { layer: layerName, limit: 200 } },
    MOST_DRAWN,
  );
  const { hasNextPage, fetchNextPage, rows } = list;
  const [chosen, setChosen] = useState<string | null>(null);
  const panel = useRef<HTMLElement>(null);
  const [from, setFrom] = useState<HTMLElement | null>(null);
  function chooseInPlan(id: string) {
    setChosen(id);
    setFrom(null);
  }
  /** What is chosen in the table is shown far above it: eyes and focus go there, and can come back. */
  function chooseInTable(id: string, button: HTMLElement) {
    setChosen(id);
    setFrom(button);
    bringIntoView(panel.current);
  }

  const error = layer.error ?? summary.error ?? list.error;
  if (error)
    return <Failure error={error} retry={() => void [layer, summary, list].map((q) => q.refetch())} />;
  if (!layer.data || !summary.data || list.isPending) return <Skeleton lines={8} />;
  const unit = unitSign(layer.data.units.length);
  const checks = rows.filter((check) => check.layerVersion === layer.data.version);
  const placed = checks.filter((check) => check.deviation !== null);
  const shown = placed.find((check) => check.id === chosen) ?? worst(placed);
  return (
    <>
      <Crumb
        trail={[{ name: 'Grade', href: `/projects/${projectId}/grade` }, { name: layerName }]}
        note={unitName(layer.data.units.length)}
      />
      <PageHead
        title={layerName}
        sub={
          <>
            <strong className="font-semibold text-ink">{liesAt(layer.data)}</strong>, allowed{' '}
            {allowed(layer.data)}
            {layer.data.tolerance.citation ? ` (${layer.data.tolerance.citation})` : ''}, version{' '}
            {layer.data.version}; {acceptedBy(layer.data)}
          </>
        }
        aside={
          summary.data.count > 0 ? (
            <Stamp
              verdict={summary.data.verdict}
              word={STAMP[summary.data.verdict]}
              reason={`${summary.data.withinTolerance} of ${summary.data.count} inside`}
            />
          ) : null
        }
      >
        <Radio>{summary.data.radio}</Radio>
      </PageHead>
      {placed.length === 0 ? (
        <Empty title="No check on this layer yet">
          Grade shots are posted to <code className="font-code text-[13px]">/uploads</code>, from a setup in
          force or with coordinates.
        </Empty>
      ) : (
        <>
          <Facts facts={factsOf(summary.data, unit)} />
          <div className="grid gap-9 lg:grid-cols-[minmax(0,1.55fr)_minmax(280px,1fr)]">
            <DeviationPlan checks={placed} chosen={shown?.id ?? null} choose={chooseInPlan} />
            <div className="space-y-7">
              <section>
                <h2 className="mb-2 font-head text-[19px]">Deviation from the layer</h2>
                <Histogram
                  values={placed.flatMap(({ deviation }) => (deviation === null ? [] : [deviation]))}
                  tolerance={layer.data.tolerance}
                  unit={layer.data.units.length}
                />
              </section>
              {shown ? (
                <OneCheck
                  panel={panel}
                  check={shown}
                  layer={layer.data}
                  projectId={projectId}
                  back={from ? () => from.focus() : undefined}
                />
              ) : null}
            </div>
          </div>
        </>
      )}
      <div className="mt-9 space-y-9">
        {summary.data.reasons.length > 0 ? <ReasonList reasons={summary.data.reasons} notes={[]} /> : null}
        {checks.length > 0 ? (
          <CheckTable
            checks={checks}
            layerName={layerName}
            chosen={shown?.id ?? null}
            choose={chooseInTable}
            more={{ has: hasNextPage, busy: list.isFetchingNextPage, read: fetchNextPage }}
          />
        ) : null}
      </div>
    </>
  );
}

function worst<C extends { deviation: number | null }>(checks: readonly C[]): C | undefined {
  return checks.reduce<C | undefined>(
    (most, check) =>
      Math.abs(check.deviation ?? 0) > Math.abs(most?.deviation ?? 0) ? check : (most ?? check),
    undefined,
  );
}

function factsOf(summary: Summary, unit: string): Fact[] {
  const { mean, standardDeviation, percentWithinLimits, notCounted } = summary;
  const beside = notCounted.outside + notCounted.notInForce;
  const facts: Fact[] = [
    { value: summary.count, word: beside > 0 ? `checks that count, ${beside} do not` : 'checks' },
    {
      value: summary.label ?? 'none',
      word: mean === null ? 'mean' : `mean, ${signed(mean, 3)} ${unit}`,
    },
    {
      value: standardDeviation === null ? 'none' : `${fixed(standardDeviation, 3)} ${unit}`,
      word: 'standard deviation',
    },
    { value: `${summary.withinTolerance} of ${summary.count}`, word: 'inside the tolerance' },
  ];
  if (percentWithinLimits !== null)
    facts.push({ value: `${fixed(percentWithinLimits, 0)} %`, word: 'within limits, estimated' });
  return facts;
}
