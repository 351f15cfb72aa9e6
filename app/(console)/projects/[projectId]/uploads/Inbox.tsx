'use client';

import Link from 'next/link';
import { useState } from 'react';
import { usePages } from '@/app/ui/data/queries';
import { Select } from '@/app/ui/form/Select';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { bytes, moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';
import { uploadState } from '@/app/ui/uploadState';
import type * as contracts from '@/openapi/contracts/uploads';

export function Inbox({ projectId }: { projectId: string }) {
  const [status, setStatus] = useState<'processed' | 'refused' | ''>('');
  const list = usePages<typeof contracts.listUploads>('/projects/{projectId}/uploads', {
    params: { projectId },
    query: { status: status || undefined },
  });
  if (list.error) return <Failure error={list.error} retry={list.refetch} />;
  return (
    <>
      <div className="mb-6 max-w-[14rem] print:hidden">
        <Select
          label="What became of them"
          value={status}
          onChange={(event) => setStatus(event.target.value as typeof status)}
        >
          <option value="">all</option>
          <option value="processed">taken in</option>
          <option value="refused">refused as a whole</option>
        </Select>
      </div>
      {list.isPending ? (
        <Skeleton />
      ) : list.rows.length === 0 ? (
        <Empty title={status ? 'None of these' : 'Nothing was sent in yet'}>
          {status ? null : (
            <>
              <Link href="/keys" className="underline">
                Make a key
              </Link>{' '}
              and post with it: <code className="font-code text-[13px]">POST /uploads</code>. The examples
              show how.
            </>
          )}
        </Empty>
      ) : (
        <Table
          caption="Uploads, newest first"
          file="uploads"
          rows={list.rows}
          keyOf={(upload) => upload.id}
          more={{ has: list.hasNextPage, busy: list.isFetchingNextPage, read: list.fetchNextPage }}
          columns={[
            {
              name: 'Received',
              value: (upload) => upload.receivedAt,
              cell: (upload) => (
                <Link href={`/projects/${projectId}/uploads/${upload.id}`} className="font-semibold text-ink">
                  {moment(upload.receivedAt)}
                </Link>
              ),
            },
            {
              name: 'Its own id',
              value: (upload) => upload.clientId,
              cell: (upload) =>
                upload.clientId === null ? (
                  <span className="text-ink-third">could not be read</span>
                ) : (
                  <code className="font-code text-[13px] break-all">{upload.clientId}</code>
                ),
            },
            { name: 'From', wide: true, value: (upload) => upload.sender },
            {
              name: 'Size',
              unit: 'bytes',
              wide: true,
              figures: true,
              value: (upload) => upload.size,
              cell: (upload) => bytes(upload.size),
            },
            { name: 'Accepted', figures: true, wide: true, value: (upload) => upload.counts.accepted },
            { name: 'Refused', figures: true, wide: true, value: (upload) => upload.counts.refused },
            {
              name: 'State',
              value: (upload) => uploadState(upload).word,
              cell: (upload) => <State tone={uploadState(upload).tone}>{uploadState(upload).word}</State>,
            },
          ]}
        />
      )}
    </>
  );
}
