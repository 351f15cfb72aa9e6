'use client';

import Link from 'next/link';
import { usePages } from '@/app/ui/data/queries';
import { Failure, Skeleton } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import { Table } from '@/app/ui/table/Table';
import type { AnswerOf } from '@/openapi/contract';
import type * as control from '@/openapi/contracts/control';
import type * as setups from '@/openapi/contracts/setups';

type Answered = AnswerOf<typeof setups.getSetupAffected>;
type Item = Answered['data'][number];

const WORD: Record<Item['kind'], string> = {
  setup: 'setup',
  release: 'machine released',
  benchCheck: 'bench check',
  gradeCheck: 'grade check',
};

/** What hangs on a setup, or on a control point, since it was last known to be good. */
export function AffectedList({
  projectId,
  of,
}: {
  projectId: string;
  of: { setupId: string } | { pointName: string };
}) {
  const ofSetup = 'setupId' in of;
  const bySetup = usePages<typeof setups.getSetupAffected>(
    '/projects/{projectId}/setups/{setupId}/affected',
    { params: { projectId, setupId: ofSetup ? of.setupId : '' } },
    { enabled: ofSetup },
  );
  const byPoint = usePages<typeof control.getControlPointAffected>(
    '/projects/{projectId}/control-points/{pointName}/affected',
    { params: { projectId, pointName: ofSetup ? '' : of.pointName } },
    { enabled: !ofSetup },
  );
  const list = ofSetup ? bySetup : byPoint;
  if (list.error) return <Failure error={list.error} retry={list.refetch} />;
  if (!list.data) return <Skeleton lines={4} />;
  const [first] = list.data.pages as unknown as Answered[];
  return (
    <section>
      <h2 className="mb-1 font-head text-[19px]">Affected</h2>
      <p className="mb-2 text-ink-second">{first.since.text}</p>
      <ul className="mb-5">
        {first.actions.map(({ code, text, action }) => (
          <li key={code} className="border-b border-rule py-3">
            <p className="font-semibold">{text}</p>
            {action ? <p className="text-ink-second">{action}</p> : null}
          </li>
        ))}
      </ul>
      {list.rows.length === 0 ? null : (
        <Table
          caption="What is affected, oldest first"
          file="affected"
          rows={list.rows as Item[]}
          keyOf={(row) => `${row.kind}${row.id}`}
          more={{
            has: list.hasNextPage,
            busy: list.isFetchingNextPage,
            read: () => void list.fetchNextPage(),
          }}
          columns={[
            { name: 'When', value: (row) => row.at, cell: (row) => moment(row.at) },
            { name: 'What', value: (row) => WORD[row.kind] },
            {
              name: 'Setup',
              value: (row) => row.station,
              cell: (row) =>
                row.setupId === null ? (
                  <span className="text-ink-third">none</span>
                ) : (
                  <Link
                    href={`/projects/${projectId}/setups/${row.setupId}`}
                    className="font-semibold text-ink"
                  >
                    {row.station}
                  </Link>
                ),
            },
            { name: 'Machine', value: (row) => row.machine },
            { name: 'Layer', value: (row) => row.layer },
            { name: 'Verdict then', wide: true, value: (row) => row.verdict },
          ]}
        />
      )}
    </section>
  );
}
