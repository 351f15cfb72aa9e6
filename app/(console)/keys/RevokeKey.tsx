'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Failure } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import type * as contracts from '@/openapi/contracts/apiKeys';
import type { Key } from './keyState';

export function RevokeKey({ apiKey, close }: { apiKey: Key; close: () => void }) {
  const client = useQueryClient();
  const revoke = useMutation({
    mutationFn: () =>
      call<typeof contracts.revokeApiKey>('POST', '/api-keys/{apiKeyId}/revoke', {
        params: { apiKeyId: apiKey.id },
      }),
    onSuccess: async () => {
      await refresh(client, '/api-keys');
      close();
    },
  });
  return (
    <Dialog title={`Revoke ${apiKey.name}`} close={close} held={revoke.isPending}>
      <div className="space-y-4">
        <p>
          The next request with it is refused, and it never works again. What it sent stands.{' '}
          {apiKey.lastUsedAt ? `It was last used ${moment(apiKey.lastUsedAt)}.` : 'It was never used.'}
        </p>
        {revoke.error ? <Failure error={revoke.error} /> : null}
        <div className="flex gap-3">
          <Button look="danger" disabled={revoke.isPending} onClick={() => revoke.mutate()}>
            Revoke it now
          </Button>
          <Button look="plain" disabled={revoke.isPending} onClick={close}>
            Keep it
          </Button>
        </div>
      </div>
    </Dialog>
  );
}
