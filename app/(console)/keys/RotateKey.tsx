'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { FormEvent } from 'react';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Select } from '@/app/ui/form/Select';
import { Failure } from '@/app/ui/Notice';
import { Once } from '@/app/ui/Once';
import type * as contracts from '@/openapi/contracts/apiKeys';
import type { Key } from './keyState';

const OVERLAPS = [
  { minutes: 0, name: 'not at all' },
  { minutes: 60, name: 'for an hour' },
  { minutes: 1440, name: 'for a day' },
  { minutes: 10_080, name: 'for a week' },
];

export function RotateKey({ apiKey, close }: { apiKey: Key; close: () => void }) {
  const client = useQueryClient();
  const rotate = useMutation({
    mutationFn: (overlapMinutes: number) =>
      call<typeof contracts.rotateApiKey>('POST', '/api-keys/{apiKeyId}/rotate', {
        params: { apiKeyId: apiKey.id },
        body: { overlapMinutes },
      }),
    onSuccess: () => refresh(client, '/api-keys'),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    rotate.mutate(Number(new FormData(event.currentTarget).get('overlap')));
  }
  return (
    <Dialog title={`Rotate ${apiKey.name}`} close={close} held={rotate.isPending || rotate.isSuccess}>
      {rotate.data ? (
        <Once
          secret={rotate.data.secret}
          what="the new key"
          note="Put it in before the old one ends; scopes and projects are the same."
          close={close}
        />
      ) : (
        <form onSubmit={submit} className="space-y-4">
          <p>A new key with the same scopes and projects is made.</p>
          <Select label="The old key still works" name="overlap" defaultValue={1440}>
            {OVERLAPS.map(({ minutes, name }) => (
              <option key={minutes} value={minutes}>
                {name}
              </option>
            ))}
          </Select>
          {rotate.error ? <Failure error={rotate.error} /> : null}
          <div className="flex gap-3">
            <Button type="submit" disabled={rotate.isPending}>
              Make the new key
            </Button>
            <Button look="plain" disabled={rotate.isPending} onClick={close}>
              Not now
            </Button>
          </div>
        </form>
      )}
    </Dialog>
  );
}
