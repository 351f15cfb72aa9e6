'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { FormEvent } from 'react';
import { call } from '@/app/ui/data/call';
import { refresh, usePages } from '@/app/ui/data/queries';
import { useWhoami } from '@/app/ui/data/whoami';
import { Button } from '@/app/ui/form/Button';
import { Check } from '@/app/ui/form/Check';
import { Dialog } from '@/app/ui/form/Dialog';
import { Field } from '@/app/ui/form/Field';
import { Select } from '@/app/ui/form/Select';
import { Failure } from '@/app/ui/Notice';
import { Once } from '@/app/ui/Once';
import type { SentOf } from '@/openapi/contract';
import type * as contracts from '@/openapi/contracts/apiKeys';
import type * as peopleContracts from '@/openapi/contracts/people';
import type * as projectContracts from '@/openapi/contracts/projects';
import { SCOPE_NAMES, SCOPES, type Scope } from '@/openapi/scopes';

/** What the scripts of the examples need: bring in a site and its observations, release, read results. */
const USUAL: readonly Scope[] = ['uploads:write', 'setups:read', 'grade:read'];

export function MakeKey({ close }: { close: () => void }) {
  const client = useQueryClient();
  const me = useWhoami().data;
  const projects = usePages<typeof projectContracts.listProjects>('/projects', {
    query: { limit: 200 },
  }).rows;
  const people = usePages<typeof peopleContracts.listPeople>('/people', { query: { limit: 200 } }).rows;
  const make = useMutation({
    mutationFn: (body: SentOf<typeof contracts.createApiKey>) =>
      call<typeof contracts.createApiKey>('POST', '/api-keys', { body }),
    onSuccess: () => refresh(client, '/api-keys'),
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const chosen = form.getAll('project').map(String);
    const until = String(form.get('until') ?? '');
    make.mutate({
      name: String(form.get('name')),
      scopes: form.getAll('scope') as Scope[],
      projectIds: chosen.length > 0 ? chosen : null,
      responsiblePersonId: String(form.get('person') ?? '') || undefined,
      expiresAt: until ? new Date(until).toISOString() : undefined,
    });
  }
  return (
    <Dialog
      title={make.data ? `Key ${make.data.apiKey.name}` : 'Make a key'}
      close={close}
      held={make.isPending || make.isSuccess}
    >
      {make.data ? (
        <Once
          secret={make.data.secret}
          what="the key"
          note="Keep it where the device or program keeps its secrets. The hub keeps only its hash."
          close={close}
        />
      ) : (
        <form onSubmit={submit} className="space-y-5">
          <Field
            label="Name, as the device or program is called on site"
            name="name"
            required
            maxLength={120}
            autoFocus
          />
          <fieldset>
            <legend className="mb-2 font-head text-[13px] text-ink-second">It may</legend>
            <div className="grid max-h-[17rem] gap-2.5 overflow-y-auto rounded border border-rule-strong bg-sheet p-3.5">
              {SCOPE_NAMES.filter((scope) => me?.scopes.includes(scope)).map((scope) => (
                <Check
                  key={scope}
                  name="scope"
                  value={scope}
                  defaultChecked={USUAL.includes(scope)}
                  note={scope}
                >
                  {SCOPES[scope]}
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
          <div className="grid gap-4 sm:grid-cols-2">
            <Select label="Who answers for it" name="person" key={me?.personId} defaultValue={me?.personId}>
              {people
                .filter(({ status }) => status === 'active')
                .map((person) => (
                  <option key={person.id} value={person.id}>
                    {person.name}
                  </option>
                ))}
            </Select>
            <Field label="Works until, if it ends" name="until" type="datetime-local" />
          </div>
          {make.error ? <Failure error={make.error} /> : null}
          <div className="flex gap-3">
            <Button type="submit" disabled={make.isPending}>
              Make the key
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
