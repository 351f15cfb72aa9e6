'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import { type FormEvent, useState } from 'react';
import { Caution } from '@/app/ui/Caution';
import { call } from '@/app/ui/data/call';
import { refresh, usePages } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Dialog } from '@/app/ui/form/Dialog';
import { Field } from '@/app/ui/form/Field';
import { Select } from '@/app/ui/form/Select';
import { liesAt } from '@/app/ui/layerWords';
import { Failure } from '@/app/ui/Notice';
import type { SentOf } from '@/openapi/contract';
import type * as design from '@/openapi/contracts/design';
import type * as contracts from '@/openapi/contracts/setups';
import type { ShownSetup } from './SetupSheet';

type Body = SentOf<typeof contracts.releaseSetup>;

export function ReleaseDialog({
  setup,
  projectId,
  close,
}: {
  setup: ShownSetup;
  projectId: string;
  close: () => void;
}) {
  const client = useQueryClient();
  const { rows: layers } = usePages<typeof design.listLayers>('/projects/{projectId}/layers', {
    params: { projectId },
    query: { limit: 200 },
  });
  const [machine, setMachine] = useState('');
  const release = useMutation({
    mutationFn: (body: Body) =>
      call<typeof contracts.releaseSetup>('POST', '/projects/{projectId}/setups/{setupId}/release', {
        params: { projectId, setupId: setup.id },
        body,
      }),
    onSuccess: async () => {
      await refresh(client, '/projects/{projectId}/setups/{setupId}', '/projects/{projectId}/setups');
      close();
    },
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const text = (name: string) => String(form.get(name) ?? '').trim() || undefined;
    const layer = layers.find(({ name }) => name === text('layer'));
    const hours = text('hours');
    release.mutate({
      machine: text('machine'),
      layer: layer?.name,
      offset: layer?.offset,
      validMinutes: hours === undefined ? undefined : Math.round(Number(hours) * 60),
      note: text('note'),
    });
  }
  return (
    <Dialog title={`Release ${setup.station}`} close={close} held={release.isPending}>
      <form onSubmit={submit} className="space-y-4">
        <div className="grid gap-4 sm:grid-cols-2">
          <Field
            label="Machine, if one works from it"
            name="machine"
            value={machine}
            onChange={(event) => setMachine(event.target.value)}
            maxLength={64}
          />
          <Select
            label="Layer that it will cut"
            name="layer"
            required={machine.trim() !== ''}
            defaultValue=""
          >
            <option value="">none</option>
            {layers.map((layer) => (
              <option key={layer.name} value={layer.name}>
                {layer.name}: {liesAt(layer)}
              </option>
            ))}
          </Select>
          <Field
            label="Hours in force"
            name="hours"
            type="number"
            min={0.25}
            max={336}
            step={0.25}
            placeholder="as the project says"
          />
        </div>
        <Field
          label={setup.verdict === 'hold' ? 'Why it may be used although it is on hold' : 'Note'}
          name="note"
          required={setup.verdict === 'hold'}
          maxLength={2000}
        />
        <Caution sentences={setup.cautions} />
        {release.error ? <Failure error={release.error} /> : null}
        <div className="flex gap-3">
          <Button type="submit" disabled={release.isPending}>
            Release
          </Button>
          <Button look="plain" disabled={release.isPending} onClick={close}>
            Not now
          </Button>
        </div>
      </form>
    </Dialog>
  );
}
