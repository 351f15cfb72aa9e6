'use client';

import { useState } from 'react';
import { usePages } from '@/app/ui/data/queries';
import { useCan } from '@/app/ui/data/whoami';
import { Button } from '@/app/ui/form/Button';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Failure, Skeleton } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { Table } from '@/app/ui/table/Table';
import type * as contracts from '@/openapi/contracts/people';
import { ChangePerson } from './ChangePerson';
import { InvitePerson } from './InvitePerson';
import type { Person } from './person';

const TONE = { active: 'pass', invited: 'hold', closed: 'fail' } as const;
const WORD = { active: 'active', invited: 'invited', closed: 'closed' } as const;

export function People() {
  const list = usePages<typeof contracts.listPeople>('/people', { query: { limit: 200 } });
  const mayChange = useCan('people:write');
  const [open, setOpen] = useState<Person | 'invite' | null>(null);
  return (
    <>
      <Crumb trail={[{ name: 'People' }]} />
      <PageHead
        title="People"
        sub="Who may see and do what, by role."
        aside={mayChange ? <Button onClick={() => setOpen('invite')}>Invite a person</Button> : null}
      />
      {list.error ? (
        <Failure error={list.error} retry={list.refetch} />
      ) : list.isPending ? (
        <Skeleton />
      ) : (
        <Table
          caption="People, newest first"
          file="people"
          rows={list.rows}
          keyOf={(person) => person.id}
          more={{ has: list.hasNextPage, busy: list.isFetchingNextPage, read: list.fetchNextPage }}
          columns={[
            {
              name: 'Name',
              value: (person) => person.name,
              cell: (person) => <span className="font-semibold">{person.name}</span>,
            },
            { name: 'E-mail', wide: true, value: (person) => person.email },
            { name: 'Role', value: (person) => person.role },
            {
              name: 'Since',
              wide: true,
              value: (person) => person.createdAt,
              cell: (person) => moment(person.createdAt),
            },
            {
              name: 'State',
              value: (person) => person.status,
              cell: (person) => <State tone={TONE[person.status]}>{WORD[person.status]}</State>,
            },
            ...(mayChange
              ? [
                  {
                    name: 'Acts',
                    cell: (person: Person) => (
                      <span className="flex justify-end">
                        <Button look="plain" small onClick={() => setOpen(person)}>
                          Change<span className="sr-only"> {person.name}</span>
                        </Button>
                      </span>
                    ),
                  },
                ]
              : []),
          ]}
        />
      )}
      {open === 'invite' ? <InvitePerson close={() => setOpen(null)} /> : null}
      {open !== null && open !== 'invite' ? <ChangePerson person={open} close={() => setOpen(null)} /> : null}
    </>
  );
}
