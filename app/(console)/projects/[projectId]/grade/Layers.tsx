'use client';

import Link from 'next/link';
import { usePages, useRead } from '@/app/ui/data/queries';
import { OffsetSection } from '@/app/ui/draw/OffsetSection';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { acceptedBy, allowed, liesAt, signedOffset } from '@/app/ui/layerWords';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { unitName } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';
import type * as designContracts from '@/openapi/contracts/design';

export function Layers({ projectId }: { projectId: string }) {
  const list = usePages<typeof designContracts.listLayers>('/projects/{projectId}/layers', {
    params: { projectId },
  });
  const unit = list.rows[0]?.units.length;
  return (
    <>
      <Crumb trail={[{ name: 'Grade' }]} note={unit ? unitName(unit) : undefined} />
      <PageHead
        title="Grade"
        sub="Each layer lies at an offset from a design surface; ground is checked against it."
      />
      {list.error ? (
        <Failure error={list.error} retry={list.refetch} />
      ) : list.isPending ? (
        <Skeleton />
      ) : list.rows.length === 0 ? (
        <Empty title="No layer yet">
          Post a surface to <code className="font-code text-[13px]">/surfaces</code> and a layer to{' '}
          <code className="font-code text-[13px]">/layers</code>; the examples show how.{' '}
          <Link href="/reference" className="underline">
            Read the reference
          </Link>
        </Empty>
      ) : (
        <Table
          caption="Layers"
          file="layers"
          rows={list.rows}
          keyOf={(layer) => layer.name}
          more={{ has: list.hasNextPage, busy: list.isFetchingNextPage, read: list.fetchNextPage }}
          columns={[
            {
              name: 'Layer',
              value: (layer) => layer.name,
              cell: (layer) => (
                <Link
                  href={`/projects/${projectId}/grade/${encodeURIComponent(layer.name)}`}
                  className="font-semibold text-ink"
                >
                  {layer.name}
                </Link>
              ),
            },
            {
              name: 'Offset',
              unit: list.rows[0].units.length,
              value: (layer) => layer.offset,
              cell: (layer) => (
                <span className="flex items-center gap-3">
                  <span className="max-md:hidden">
                    <OffsetSection offset={layer.offset} />
                  </span>
                  <span>
                    <span className="block font-medium whitespace-nowrap">
                      {signedOffset(layer.offset, layer.units.length)}
                    </span>
                    <span className="block text-[13.5px] text-ink-second">{liesAt(layer)}</span>
                  </span>
                </span>
              ),
            },
            {
              name: 'Allowed',
              value: (layer) => allowed(layer),
            },
            {
              name: 'Lot is accepted by',
              wide: true,
              value: (layer) => acceptedBy(layer),
              cell: (layer) => <span className="text-ink-second">{acceptedBy(layer)}</span>,
            },
            {
              name: 'Stands',
              cell: (layer) => <Stands projectId={projectId} layer={layer.name} />,
            },
          ]}
        />
      )}
    </>
  );
}

/** The verdict of one layer, read beside the list. */
function Stands({ projectId, layer }: { projectId: string; layer: string }) {
  const { data, isError } = useRead<typeof designContracts.getLayerSummary>(
    '/projects/{projectId}/layers/{layerName}/summary',
    { params: { projectId, layerName: layer } },
  );
  if (isError) return <span className="text-ink-third">could not be read</span>;
  if (!data) return <span role="status" aria-label="Reading" />;
  if (data.count === 0) return <State tone="plain">no check yet</State>;
  return (
    <>
      <State tone={data.verdict}>{data.verdict}</State>
      <span className="block text-[13.5px] text-ink-second">
        {data.withinTolerance} of {data.count} inside
      </span>
    </>
  );
}
