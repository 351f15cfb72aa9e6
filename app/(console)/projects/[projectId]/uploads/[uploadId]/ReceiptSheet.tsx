'use client';

import { useState } from 'react';
import { useRead } from '@/app/ui/data/queries';
import { useCan } from '@/app/ui/data/whoami';
import { Button } from '@/app/ui/form/Button';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Ledger } from '@/app/ui/Ledger';
import { Failure, Skeleton } from '@/app/ui/Notice';
import { bytes, moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { uploadState } from '@/app/ui/uploadState';
import type * as contracts from '@/openapi/contracts/uploads';
import { Became } from './Became';
import { Mend } from './Mend';
import { RefusedItems } from './RefusedItems';
import { useRawText } from './rawText';

export function ReceiptSheet({ projectId, uploadId }: { projectId: string; uploadId: string }) {
  const receipt = useRead<typeof contracts.getUpload>('/projects/{projectId}/uploads/{uploadId}', {
    params: { projectId, uploadId },
  });
  const raw = useRawText(projectId, receipt.data?.upload);
  const mayPost = useCan('uploads:write');
  const [mending, setMending] = useState(false);
  if (receipt.error) return <Failure error={receipt.error} retry={receipt.refetch} />;
  if (!receipt.data) return <Skeleton lines={8} />;
  const { upload, refused } = receipt.data;
  const name = upload.clientId ?? 'Unreadable body';
  // Mended text is sent as JSON; a table is mended where it was made.
  const mendable = refused.length > 0 && mayPost && upload.mediaType !== 'text/csv';
  return (
    <>
      <Crumb
        trail={[{ name: 'Uploads', href: `/projects/${projectId}/uploads` }, { name }]}
        note="as it was first answered"
      />
      <PageHead
        title={name}
        sub={`Sent by ${upload.sender}, ${moment(upload.receivedAt)}`}
        aside={
          <div className="text-[19px]">
            <State tone={uploadState(upload).tone} size={22}>
              {uploadState(upload).word}
            </State>
          </div>
        }
      />
      <div className="grid gap-9 lg:grid-cols-[minmax(0,1.7fr)_minmax(280px,1fr)]">
        <div className="min-w-0 space-y-9">
          {refused.length > 0 ? <RefusedItems refused={refused} text={raw.data?.text ?? null} /> : null}
          {mending && raw.data?.text ? (
            <Mend
              projectId={projectId}
              clientId={upload.clientId}
              text={raw.data.text}
              refused={refused}
              close={() => setMending(false)}
            />
          ) : mendable && raw.data?.text ? (
            <Button look="plain" onClick={() => setMending(true)}>
              Mend and send again
            </Button>
          ) : null}
          <Became receipt={receipt.data} projectId={projectId} />
        </div>
        <div className="space-y-6">
          <Ledger
            title="As it came"
            entries={[
              { name: 'Items accepted', value: upload.counts.accepted },
              { name: 'Items refused', value: upload.counts.refused },
              { name: 'Size', value: bytes(upload.size) },
              { name: 'Media type', value: upload.mediaType || 'none stated' },
              { name: 'Encoding', value: upload.contentEncoding ?? 'plain' },
            ]}
          />
          <p className="text-[13.5px] text-ink-second">
            SHA-256 <code className="font-code text-[12.5px] break-all text-ink">{upload.sha256}</code>
          </p>
          <p>
            <a
              href={`/api/v1/projects/${projectId}/uploads/${uploadId}/raw`}
              className="font-semibold underline"
              download
            >
              Save the bytes as they came
            </a>
          </p>
          {raw.error ? <Failure error={raw.error} retry={raw.refetch} /> : null}
          {raw.data && raw.data.text === null ? (
            <p className="text-[13.5px] text-ink-second">{raw.data.why}</p>
          ) : null}
        </div>
      </div>
    </>
  );
}
