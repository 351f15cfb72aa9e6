'use client';

import { useState } from 'react';
import { usePages } from '@/app/ui/data/queries';
import { useCan } from '@/app/ui/data/whoami';
import { Button } from '@/app/ui/form/Button';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import type * as contracts from '@/openapi/contracts/apiKeys';
import { KeyTable } from './KeyTable';
import { MakeKey } from './MakeKey';

export function Keys() {
  const list = usePages<typeof contracts.listApiKeys>('/api-keys', { query: { limit: 200 } });
  const mayMake = useCan('keys:write');
  const [making, setMaking] = useState(false);
  return (
    <>
      <Crumb trail={[{ name: 'Keys' }]} />
      <PageHead
        title="Keys"
        sub="One key per device or program. A key is shown once, when it is made."
        aside={mayMake ? <Button onClick={() => setMaking(true)}>Make a key</Button> : null}
      />
      {list.error ? (
        <Failure error={list.error} retry={list.refetch} />
      ) : list.isPending ? (
        <Skeleton />
      ) : list.rows.length === 0 ? (
        <Empty title="No key yet">Make one for each device or program that posts or reads.</Empty>
      ) : (
        <KeyTable
          keys={list.rows}
          mayChange={mayMake}
          more={{ has: list.hasNextPage, busy: list.isFetchingNextPage, read: list.fetchNextPage }}
        />
      )}
      {making ? <MakeKey close={() => setMaking(false)} /> : null}
    </>
  );
}
