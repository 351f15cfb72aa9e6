'use client';

import { useOpenWithdrawals } from '@/app/ui/data/withdrawals';

/** How many crews have not answered, beside the way to them. */
export function OpenCount({ projectId }: { projectId: string }) {
  const { rows, hasNextPage } = useOpenWithdrawals(projectId);
  if (rows.length === 0) return null;
  return (
    <span className="ml-2 font-semibold text-fail md:ml-auto">
      {rows.length}
      {hasNextPage ? '+' : ''}
      <span className="sr-only"> not answered</span>
    </span>
  );
}
