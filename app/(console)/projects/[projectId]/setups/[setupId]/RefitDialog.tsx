'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useRouter } from 'next/navigation';
import type { FormEvent } from 'react';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Field } from '@/app/ui/form/Field';
import { Failure } from '@/app/ui/Notice';
import { COORDINATE, fixed, signed, unitSign } from '@/app/ui/numbers';
import type * as contracts from '@/openapi/contracts/setups';
import type { ShownSetup } from './SetupSheet';

/** Leaves targets out and computes anew; what was left out stays visible, with the reason. */
export function RefitDialog({
  setup,
  projectId,
  close,
}: {
  setup: ShownSetup;
  projectId: string;
  close: () => void;
}) {
  const client = useQueryClient();
  const router = useRouter();
  const refit = useMutation({
    mutationFn: (body: { exclude: string[]; reason: string }) =>
      call<typeof contracts.refitSetup>('POST', '/projects/{projectId}/setups/{setupId}/refits', {
        params: { projectId, setupId: setup.id },
        body,
      }),
    onSuccess: async (made) => {
      await refresh(client, '/projects/{projectId}/setups/{setupId}', '/projects/{projectId}/setups');
      router.push(`/projects/${projectId}/setups/${made.id}`);
    },
  });
  const marks = setup.targets.filter((target) => target.used);
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const chosen = new Set(form.getAll('target').map(String));
    const exclude = marks.filter((mark) => chosen.has(mark.target ?? '')).flatMap((mark) => mark.shots);
    refit.mutate({ exclude, reason: String(form.get('reason')) });
  }
  return (
    <Dialog title={`Refit ${setup.station}`} close={close} held={refit.isPending}>
      <form onSubmit={submit} className="space-y-4">
        <fieldset>
          <legend className="mb-1 font-head text-[13px] text-ink-second">Leave out</legend>
          {marks.map(({ target, residual }) => (
            <label
              key={target}
              className="flex cursor-pointer items-center gap-2.5 border-b border-rule py-2"
            >
              <input type="checkbox" name="target" value={target ?? ''} className="size-4 accent-mark" />
              <span className="font-semibold">{target}</span>
              <span className="text-ink-second">{offBy(residual, unitSign(setup.units.length))}</span>
            </label>
          ))}
        </fieldset>
        <Field label="Why" name="reason" required maxLength={2000} />
        {refit.error ? <Failure error={refit.error} /> : null}
        <div className="flex gap-3">
          <Button type="submit" disabled={refit.isPending}>
            Refit without them
          </Button>
          <Button look="plain" disabled={refit.isPending} onClick={close}>
            Keep it
          </Button>
        </div>
      </form>
    </Dialog>
  );
}

type Residual = ShownSetup['targets'][number]['residual'];

/** How far a target is from its control, as far as its shots tell. */
function offBy({ easting, northing, elevation }: Residual, unit: string): string {
  const plan =
    easting === null || northing === null
      ? null
      : `${fixed(Math.hypot(easting, northing), COORDINATE)} ${unit} in plan`;
  const height = elevation === null ? null : `${signed(elevation, COORDINATE)} ${unit} in height`;
  const told = [plan, height].filter((part) => part !== null);
  return told.length > 0 ? `off by ${told.join(', ')}` : 'its shots fix no place to compare';
}
