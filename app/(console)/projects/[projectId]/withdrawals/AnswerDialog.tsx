'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { FormEvent } from 'react';
import { Caution } from '@/app/ui/Caution';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Field } from '@/app/ui/form/Field';
import { Failure } from '@/app/ui/Notice';
import type * as contracts from '@/openapi/contracts/setups';
import type { Withdrawal } from './withdrawal';

interface Props {
  projectId: string;
  withdrawal: Withdrawal;
  close: () => void;
}

/** Says for a crew that it knows and has stopped; said once, it stands. */
export function AnswerDialog({ projectId, withdrawal, close }: Props) {
  const client = useQueryClient();
  const { id, machine, station } = withdrawal;
  const answer = useMutation({
    mutationFn: (note: string | undefined) =>
      call<typeof contracts.answerAcknowledgement>(
        'POST',
        '/projects/{projectId}/acknowledgements/{acknowledgementId}/acknowledge',
        { params: { projectId, acknowledgementId: id }, body: { note } },
      ),
    onSuccess: close,
    // Somebody else may have answered it: the list says who.
    onSettled: () => refresh(client, '/projects/{projectId}/acknowledgements'),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    answer.mutate(String(new FormData(event.currentTarget).get('note')).trim() || undefined);
  }
  return (
    <Dialog title={`Answer for ${machine}`} close={close} held={answer.isPending}>
      <form onSubmit={submit} className="space-y-4">
        <p>
          You say that the crew of {machine} knows that {station} is withdrawn, and has stopped working from
          it.
        </p>
        <Field label="Note, such as where it is parked" name="note" maxLength={2000} />
        <Caution sentences={['Answer only what the crew has told you.', 'An answer cannot be taken back.']} />
        {answer.error ? <Failure error={answer.error} /> : null}
        <div className="flex flex-wrap gap-3">
          <Button type="submit" disabled={answer.isPending}>
            It has stopped
          </Button>
          <Button look="plain" disabled={answer.isPending} onClick={close}>
            Not yet
          </Button>
        </div>
      </form>
    </Dialog>
  );
}
