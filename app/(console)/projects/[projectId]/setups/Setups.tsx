'use client';

import Link from 'next/link';
import { useState } from 'react';
import type * as z from 'zod';
import { usePages } from '@/app/ui/data/queries';
import { Select } from '@/app/ui/form/Select';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { endOf, SETUP_END } from '@/app/ui/setupEnd';
import { Table } from '@/app/ui/table/Table';
import type * as contracts from '@/openapi/contracts/setups';
import type { Setup } from '@/openapi/schemas/setup';

type Row = z.output<typeof Setup>;
type VerdictWord = Row['verdict'];

/** In force until when, or why not. */
function forceOf({ status, validUntil }: Row): string {
  if (status === 'computed') return 'not released';
  if (validUntil === null || (status !== 'released' && status !== 'expired')) return `no, ${status}`;
  return `${status === 'expired' ? 'ran out' : 'until'} ${moment(validUntil)}`;
}

/** The verdict; or, once nobody may work from the setup any more, what ended it, and the verdict as what it was. */
function Verdict({ setup }: { setup: Row }) {
  const end = endOf(setup);
  if (!end) return <State tone={setup.verdict}>{setup.verdict}</State>;
  return (
    <>
      <State tone={SETUP_END[end].tone}>{end}</State>
      <span className="block text-[13.5px] whitespace-nowrap text-ink-second">was {setup.verdict}</span>
    </>
  );
}

export function Setups({ projectId }: { projectId: string }) {
  const [verdict, setVerdict] = useState<VerdictWord | ''>('');
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
          onChange={(event) => setVerdict(event.target.value as VerdictWord | '')}
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
              cell: (setup) => <Verdict setup={setup} />,
            },
            {
              name: 'On the radio',
              below: true,
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
