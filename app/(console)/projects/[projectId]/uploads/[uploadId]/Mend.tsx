'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useRouter } from 'next/navigation';
import { type FormEvent, useId, useMemo } from 'react';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Failure } from '@/app/ui/Notice';
import type * as contracts from '@/openapi/contracts/uploads';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { isAmbiguous, leftOver } from './mended';

interface Props {
  projectId: string;
  clientId: string | null;
  text: string;
  refused: readonly ProblemItem[];
  close: () => void;
}

/** The refused items to be mended by hand and sent as an upload of their own. */
export function Mend({ projectId, clientId, text, refused, close }: Props) {
  const id = useId();
  const router = useRouter();
  const client = useQueryClient();
  const left = useMemo(() => leftOver(text, clientId, refused), [text, clientId, refused]);
  const send = useMutation({
    mutationFn: (content: string) =>
      call<typeof contracts.createUpload>('POST', '/projects/{projectId}/uploads', {
        params: { projectId },
        text: { media: 'application/json', content },
      }),
    onSettled: () => refresh(client, '/projects/{projectId}/uploads'),
    onSuccess: (receipt) => router.push(`/projects/${projectId}/uploads/${receipt.upload.id}`),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    send.mutate(String(new FormData(event.currentTarget).get('document')));
  }
  return (
    <section>
      <form onSubmit={submit} className="space-y-4">
        <div>
          <label htmlFor={id} className="mb-2 block font-head text-[19px]">
            Mend and send again
          </label>
          <p className="mb-3 max-w-[62ch] text-ink-second">
            Only what was refused is sent, under an id of its own; what was accepted stands. Correct what was
            written wrongly, never what was observed.
          </p>
          {isAmbiguous(refused) ? (
            <p className="mb-3 max-w-[62ch] font-medium">
              A key stands twice, and only you can tell which value is true: take the other one out. Both are
              still in the text.
            </p>
          ) : null}
          <textarea
            id={id}
            name="document"
            defaultValue={left}
            spellCheck={false}
            rows={Math.min(28, left.split('\n').length + 1)}
            className="w-full rounded border border-rule-strong bg-sheet px-3.5 py-2.5 font-code text-[12.5px] leading-relaxed"
          />
        </div>
        {send.error ? <Failure error={send.error} /> : null}
        <div className="flex gap-3">
          <Button type="submit" disabled={send.isPending}>
            Send
          </Button>
          <Button look="plain" onClick={close}>
            Leave it
          </Button>
        </div>
      </form>
    </section>
  );
}
