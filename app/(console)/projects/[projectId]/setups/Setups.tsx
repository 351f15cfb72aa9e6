'use client';

import Link from 'next/link';
import { useState } from 'react';
import type * as z from 'zod';
import { usePages } from '@/app/ui/data/queries';
import { Select } from '@/app/ui/form/Select';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';
import type * as contracts from '@/openapi/contracts/setups';
import type { Setup } from '@/openapi/schemas/setup';

type Row = z.output<typeof Setup>;
type Verdict = Row['verdict'];

/** In force until when, or why not. */
export function forceOf(setup: Row): string {
  if (setup.status === 'released' && setup.release) return `until ${moment(setup.release.validUntil)}`;
  return setup.status === 'computed' ? 'not released' : setup.status;
}

export function Setups({ projectId }: { projectId: string }) {
  const [verdict, setVerdict] = useState<Verdict | ''>('');
  const list = usePages<typeof contracts.listSetups>('/projects/{projectId}/setups', {
    params: { projectId },
    query: { verdict: verdict || undefined },
  });
  if (list.error) return <Failure error={list.error} retry={list.refetch} />;
  return (
    <>
      <div className="mb-6 max-w-[12rem] print:hidden">
        <Select
          label="Verdict"
          value={verdict}
          onChange={(event) => setVerdict(event.target.value as Verdict | '')}
        >
          <option value="">all</option>
          <option value="pass">pass</option>
          <option value="hold">hold</option>
          <option value="fail">fail</option>
        </Select>
      </div>
      {list.isPending ? (
        <Skeleton />
      ) : list.rows.length === 0 ? (
        <Empty title={verdict ? `No setup with the verdict ${verdict}` : 'No setup yet'}>
          {verdict ? null : (
            <>
              Post one to <code className="font-code text-[13px]">/uploads</code> with an API key; the
              examples show how.{' '}
              <Link href="/keys" className="underline">
                Make a key
              </Link>
            </>
          )}
        </Empty>
      ) : (
        <Table
          caption="Setups, newest first"
          file="setups"
          rows={list.rows}
          keyOf={(setup) => setup.id}
          more={{ has: list.hasNextPage, busy: list.isFetchingNextPage, read: list.fetchNextPage }}
          columns={[
            {
              name: 'Station',
              value: (setup) => setup.station,
              cell: (setup) => (
                <Link href={`/projects/${projectId}/setups/${setup.id}`} className="font-semibold text-ink">
                  {setup.station}
                </Link>
              ),
            },
            { name: 'Method', wide: true, value: (setup) => setup.method },
            {
              name: 'Observed',
              value: (setup) => setup.observedAt,
              cell: (setup) => moment(setup.observedAt),
            },
            {
              name: 'Verdict',
              value: (setup) => setup.verdict,
              cell: (setup) => <State tone={setup.verdict}>{setup.verdict}</State>,
            },
            {
              name: 'On the radio',
              wide: true,
              value: (setup) => setup.radio,
              cell: (setup) => <span className="block max-w-[52ch] text-ink-second">{setup.radio}</span>,
            },
            { name: 'In force', value: forceOf },
          ]}
        />
      )}
    </>
  );
}
