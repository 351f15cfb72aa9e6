'use client';

import Link from 'next/link';
import { moment } from '@/app/ui/numbers';
import { Table } from '@/app/ui/table/Table';
import type { Listed } from './withdrawal';

/** Who answered for which machine, and when. */
export function Answered({ projectId, rows, more }: Listed) {
  return (
    <section>
      <h2 className="mb-3 font-head text-[19px]">Answered</h2>
      <Table
        caption="Answered withdrawals, newest first"
        file="withdrawals"
        rows={rows}
        keyOf={(row) => row.id}
        more={more}
        columns={[
          {
            name: 'Machine',
            value: (row) => row.machine,
            cell: (row) => <span className="font-semibold">{row.machine}</span>,
          },
          {
            name: 'Setup',
            value: (row) => row.station,
            cell: (row) => (
              <Link href={`/projects/${projectId}/setups/${row.setupId}`} className="font-semibold text-ink">
                {row.station}
              </Link>
            ),
          },
          {
            name: 'Withdrawn',
            wide: true,
            value: (row) => row.withdrawnAt,
            cell: (row) => `${moment(row.withdrawnAt)} by ${row.withdrawnBy}`,
          },
          {
            name: 'Why',
            wide: true,
            value: (row) => row.reason,
            cell: (row) => <span className="block max-w-[34rem] text-ink-second">{row.reason}</span>,
          },
          {
            name: 'Answered',
            value: (row) => row.acknowledgedAt,
            cell: (row) => (row.acknowledgedAt === null ? '' : moment(row.acknowledgedAt)),
          },
          { name: 'By', value: (row) => row.acknowledgedBy },
          {
            name: 'Note',
            wide: true,
            value: (row) => row.note,
            cell: (row) => <span className="block max-w-[34rem] text-ink-second">{row.note}</span>,
          },
        ]}
      />
    </section>
  );
}
