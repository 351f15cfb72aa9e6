'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { FormEvent } from 'react';
import { CONTROL_MEANING, type ControlState } from '@/app/ui/controlState';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Field } from '@/app/ui/form/Field';
import { Select } from '@/app/ui/form/Select';
import { Failure } from '@/app/ui/Notice';
import type * as contracts from '@/openapi/contracts/control';

/** Says how far a point is trusted, and why. */
export function Trust({
  projectId,
  pointName,
  status,
}: {
  projectId: string;
  pointName: string;
  status: ControlState;
}) {
  const client = useQueryClient();
  const change = useMutation({
    mutationFn: (body: { status: ControlState; note: string }) =>
      call<typeof contracts.updateControlPoint>('PATCH', '/projects/{projectId}/control-points/{pointName}', {
        params: { projectId, pointName },
        body,
      }),
    onSuccess: () =>
      refresh(
        client,
        '/projects/{projectId}/control-points',
        '/projects/{projectId}/control-points/{pointName}',
        '/projects/{projectId}/control-points/{pointName}/history',
        '/projects/{projectId}/control-points/{pointName}/affected',
      ),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = event.currentTarget;
    const fields = new FormData(form);
    change.mutate(
      { status: String(fields.get('status')) as ControlState, note: String(fields.get('note')) },
      { onSuccess: () => form.reset() },
    );
  }
  return (
    <section className="print:hidden">
      <h2 className="mb-3 font-head text-[19px]">Trust</h2>
      <form key={status} onSubmit={submit} className="space-y-4">
        <Select label="State" name="status" defaultValue={status}>
          {(Object.keys(CONTROL_MEANING) as ControlState[]).map((state) => (
            <option key={state} value={state}>
              {state}: {CONTROL_MEANING[state]}
            </option>
          ))}
        </Select>
        <Field label="Why" name="note" required maxLength={2000} />
        {change.error ? <Failure error={change.error} /> : null}
        <p role="status" className="text-[13.5px] text-ink-second">
          {change.isSuccess
            ? `It is ${change.data.status} now. Setups that stand keep what they were computed with.`
            : ''}
        </p>
        <Button type="submit" look="plain" disabled={change.isPending}>
          Change the state
        </Button>
      </form>
    </section>
  );
}
