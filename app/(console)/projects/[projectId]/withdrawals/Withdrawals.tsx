'use client';

import { usePages } from '@/app/ui/data/queries';
import { useWhoami } from '@/app/ui/data/whoami';
import { useOpenWithdrawals } from '@/app/ui/data/withdrawals';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import type * as contracts from '@/openapi/contracts/setups';
import { Answered } from './Answered';
import { Waiting } from './Waiting';

/** What crews have to answer, and what they answered. */
export function Withdrawals({ projectId }: { projectId: string }) {
  const me = useWhoami();
  const open = useOpenWithdrawals(projectId);
  const answered = usePages<typeof contracts.listAcknowledgements>('/projects/{projectId}/acknowledgements', {
    params: { projectId },
    query: { open: 'false' },
  });
  const error = me.error ?? open.error ?? answered.error;
  return (
    <>
      <Crumb trail={[{ name: 'Withdrawals' }]} />
      <PageHead
        title="Withdrawals"
        sub="A withdrawal stops no machine: each crew is told by radio, and its answer is kept here."
      />
      {error ? (
        <Failure error={error} retry={() => void [me, open, answered].map((query) => query.refetch())} />
      ) : open.isPending || answered.isPending ? (
        <Skeleton />
      ) : (
        <div className="space-y-10">
          {open.rows.length > 0 ? (
            <Waiting
              projectId={projectId}
              rows={open.rows}
              more={{ has: open.hasNextPage, busy: open.isFetchingNextPage, read: open.fetchNextPage }}
            />
          ) : (
            <Empty title="No crew has to answer">
              When a setup is withdrawn, each machine that it was released to stands here until its crew is
              known to have stopped.
            </Empty>
          )}
          {answered.rows.length > 0 ? (
            <Answered
              projectId={projectId}
              rows={answered.rows}
              more={{
                has: answered.hasNextPage,
                busy: answered.isFetchingNextPage,
                read: answered.fetchNextPage,
              }}
            />
          ) : null}
        </div>
      )}
    </>
  );
}
