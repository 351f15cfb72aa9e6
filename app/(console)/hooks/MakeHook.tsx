'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { FormEvent } from 'react';
import { call } from '@/app/ui/data/call';
import { refresh, usePages } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Check } from '@/app/ui/form/Check';
import { Dialog } from '@/app/ui/form/Dialog';
import { Field } from '@/app/ui/form/Field';
import { Failure } from '@/app/ui/Notice';
import { Once } from '@/app/ui/Once';
import type { SentOf } from '@/openapi/contract';
import type * as projectContracts from '@/openapi/contracts/projects';
import type * as contracts from '@/openapi/contracts/webhooks';
import { SUBJECTS } from './hook';

export function MakeHook({ close }: { close: () => void }) {
  const client = useQueryClient();
  const projects = usePages<typeof projectContracts.listProjects>('/projects', {
    query: { limit: 200 },
  }).rows;
  const make = useMutation({
    mutationFn: (body: SentOf<typeof contracts.createWebhookEndpoint>) =>
      call<typeof contracts.createWebhookEndpoint>('POST', '/webhook-endpoints', { body }),
    onSuccess: () => refresh(client, '/webhook-endpoints'),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const types = form.getAll('type').map(String);
    const chosen = form.getAll('project').map(String);
    make.mutate({
      url: String(form.get('url')).trim(),
      description: String(form.get('description') ?? '').trim() || null,
      eventTypes: types.length > 0 ? types : null,
      projectIds: chosen.length > 0 ? chosen : null,
    });
  }
  return (
    <Dialog
      title={make.data ? 'The hook is made' : 'Make a hook'}
      close={close}
      held={make.isPending || make.isSuccess}
    >
      {make.data ? (
        <Once
          secret={make.data.secret}
          what="the signing secret"
          note="The receiver checks every message with it; a message that it does not fit is not from this hub."
          close={close}
        />
      ) : (
        <form onSubmit={submit} className="space-y-5">
          <Field
            label="Address of the receiver"
            name="url"
            type="url"
            required
            maxLength={2000}
            placeholder="https://office.example/hooks"
            autoFocus
          />
          <Field label="What it is, in a few words" name="description" maxLength={200} />
          <fieldset>
            <legend className="mb-2 font-head text-[13px] text-ink-second">
              It is told of; of everything, where nothing is ticked
            </legend>
            <div className="grid max-h-[17rem] gap-2.5 overflow-y-auto rounded border border-rule-strong bg-sheet p-3.5">
              {SUBJECTS.map(({ types, name }) => (
                <Check key={types} name="type" value={types}>
                  {name}
                </Check>
              ))}
            </div>
          </fieldset>
          {projects.length > 0 ? (
            <fieldset>
              <legend className="mb-2 font-head text-[13px] text-ink-second">
                In these projects; in all, where none is ticked
              </legend>
              <div className="grid max-h-[9rem] gap-2.5 overflow-y-auto rounded border border-rule-strong bg-sheet p-3.5">
                {projects.map((project) => (
                  <Check key={project.id} name="project" value={project.id}>
                    {project.name}
                  </Check>
                ))}
              </div>
            </fieldset>
          ) : null}
          {make.error ? <Failure error={make.error} /> : null}
          <div className="flex gap-3">
            <Button type="submit" disabled={make.isPending}>
              Make the hook
            </Button>
            <Button look="plain" disabled={make.isPending} onClick={close}>
              Not now
            </Button>
          </div>
        </form>
      )}
    </Dialog>
  );
}
