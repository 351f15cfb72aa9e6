'use client';

import { useState } from 'react';
import { usePages } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';
import type * as peopleContracts from '@/openapi/contracts/people';
import type * as projectContracts from '@/openapi/contracts/projects';
import { SCOPE_NAMES, SCOPES } from '@/openapi/scopes';
import { type Key, keyState } from './keyState';
import { RevokeKey } from './RevokeKey';
import { RotateKey } from './RotateKey';

interface Props {
  keys: readonly Key[];
  mayChange: boolean;
  more: { has: boolean; busy: boolean; read: () => void };
}

export function KeyTable({ keys, mayChange, more }: Props) {
  const [open, setOpen] = useState<{ act: 'rotate' | 'revoke'; key: Key } | null>(null);
  const projects = usePages<typeof projectContracts.listProjects>('/projects', {
    query: { limit: 200 },
  }).rows;
  const people = usePages<typeof peopleContracts.listPeople>('/people', { query: { limit: 200 } }).rows;
  const projectsOf = ({ projectIds }: Key) =>
    projectIds === null
      ? 'all'
      : projectIds.map((id) => projects.find((project) => project.id === id)?.name ?? 'another').join(', ');
  const personOf = (key: Key) => people.find(({ id }) => id === key.responsiblePersonId)?.name ?? '';
  return (
    <>
      <Table
        caption="API keys, newest first"
        file="keys"
        rows={keys}
        keyOf={(key) => key.id}
        more={more}
        columns={[
          {
            name: 'Name',
            value: (key) => key.name,
            cell: (key) => (
              <>
                <span className="block font-semibold">{key.name}</span>
                <span className="text-[13.5px] text-ink-third">{personOf(key)}</span>
              </>
            ),
          },
          {
            name: 'Starts with',
            wide: true,
            value: (key) => key.prefix,
            cell: (key) => <code className="font-code text-[13px]">{key.prefix}…</code>,
          },
          {
            name: 'May',
            wide: true,
            value: (key) => key.scopes.join(' '),
            cell: (key) =>
              key.scopes.length === SCOPE_NAMES.length ? (
                'everything'
              ) : (
                <span className="flex max-w-[26rem] flex-wrap gap-1">
                  {key.scopes.map((scope) => (
                    <span
                      key={scope}
                      title={SCOPES[scope]}
                      className="rounded border border-rule-strong px-1.5 py-0.5 font-head text-[12.5px] text-ink-second"
                    >
                      {scope.replace(':', ' ')}
                    </span>
                  ))}
                </span>
              ),
          },
          { name: 'Projects', wide: true, value: projectsOf },
          {
            name: 'Last used',
            wide: true,
            value: (key) => key.lastUsedAt,
            cell: (key) => (key.lastUsedAt === null ? 'never' : moment(key.lastUsedAt)),
          },
          {
            name: 'State',
            value: (key) => keyState(key).word,
            cell: (key) => <State tone={keyState(key).tone}>{keyState(key).word}</State>,
          },
          ...(mayChange
            ? [
                {
                  name: 'Acts',
                  cell: (key: Key) =>
                    key.status === 'active' ? (
                      <span className="flex flex-wrap justify-end gap-2">
                        {key.successorId ? null : (
                          <Button look="plain" small onClick={() => setOpen({ act: 'rotate', key })}>
                            Rotate<span className="sr-only"> {key.name}</span>
                          </Button>
                        )}
                        <Button look="danger" small onClick={() => setOpen({ act: 'revoke', key })}>
                          {key.successorId ? 'End now' : 'Revoke'}
                          <span className="sr-only"> {key.name}</span>
                        </Button>
                      </span>
                    ) : null,
                },
              ]
            : []),
        ]}
      />
      {open?.act === 'rotate' ? <RotateKey apiKey={open.key} close={() => setOpen(null)} /> : null}
      {open?.act === 'revoke' ? <RevokeKey apiKey={open.key} close={() => setOpen(null)} /> : null}
    </>
  );
}
