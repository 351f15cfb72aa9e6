'use client';

import Link from 'next/link';
import { type FormEvent, useState } from 'react';
import { usePages } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Field } from '@/app/ui/form/Field';
import { Select } from '@/app/ui/form/Select';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { moment } from '@/app/ui/numbers';
import { Table } from '@/app/ui/table/Table';
import type * as projectContracts from '@/openapi/contracts/projects';
import type * as contracts from '@/openapi/contracts/record';

export function Audit() {
  const [filter, setFilter] = useState({ projectId: '', action: '' });
  const projects = usePages<typeof projectContracts.listProjects>('/projects', {
    query: { limit: 200 },
  }).rows;
  const list = usePages<typeof contracts.listAuditEntries>('/audit-entries', {
    query: { projectId: filter.projectId || undefined, action: filter.action || undefined },
  });
  const nameOf = (id: string | null) => projects.find((project) => project.id === id)?.name ?? '';
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    setFilter({ projectId: String(form.get('project')), action: String(form.get('action')).trim() });
  }
  return (
    <>
      <Crumb trail={[{ name: 'Audit' }]} />
      <PageHead
        title="Audit"
        sub="Every change, with who made it. Nothing here is ever changed or removed."
      />
      <form onSubmit={submit} className="mb-6 flex flex-wrap items-end gap-4 print:hidden">
        <div className="min-w-[12rem]">
          <Select label="Project" name="project" defaultValue="">
            <option value="">all, and the hub itself</option>
            {projects.map((project) => (
              <option key={project.id} value={project.id}>
                {project.name}
              </option>
            ))}
          </Select>
        </div>
        <Field label="Act, in full, such as setup.released" name="action" maxLength={80} />
        <Button type="submit" look="plain">
          Look
        </Button>
      </form>
      {list.error ? (
        <Failure error={list.error} retry={list.refetch} />
      ) : list.isPending ? (
        <Skeleton />
      ) : list.rows.length === 0 ? (
        <Empty title="No such entry">Another project or act may have some.</Empty>
      ) : (
        <Table
          caption="Audit entries, newest first"
          file="audit"
          rows={list.rows}
          keyOf={(entry) => entry.id}
          more={{ has: list.hasNextPage, busy: list.isFetchingNextPage, read: list.fetchNextPage }}
          columns={[
            { name: 'When', value: (entry) => entry.occurredAt, cell: (entry) => moment(entry.occurredAt) },
            {
              name: 'Who',
              value: (entry) => entry.actor.name,
              cell: (entry) => (
                <>
                  <span className="font-semibold">{entry.actor.name}</span>{' '}
                  <span className="text-ink-third">{entry.actor.kind}</span>
                </>
              ),
            },
            {
              name: 'Act',
              value: (entry) => entry.action,
              cell: (entry) => <code className="font-code text-[13px]">{entry.action}</code>,
            },
            {
              name: 'On',
              wide: true,
              value: (entry) => entry.subject,
              cell: (entry) => <Subject {...entry} />,
            },
            { name: 'Project', wide: true, value: (entry) => nameOf(entry.projectId) },
            {
              name: 'With',
              wide: true,
              value: (entry) => JSON.stringify(entry.details),
              cell: (entry) => <Details details={entry.details} />,
            },
          ]}
        />
      )}
    </>
  );
}

const UUID = /^[0-9a-f]{8}-[0-9a-f-]{27}$/;
/** Pages of a project that show what an act was on; `whole` where it has none of its own. */
const SECTIONS = [
  { of: 'setup.', path: 'setups' },
  { of: 'upload.', path: 'uploads' },
  { of: 'control.imported', path: 'control', whole: true },
  { of: 'control.', path: 'control' },
  { of: 'layer.', path: 'grade' },
  { of: 'grade.', path: 'grade' },
  { of: 'withdrawal.', path: 'withdrawals', whole: true },
];

/** What an act was on: an id by its end, which is what tells it from others; with its page where it has one. */
function Subject({
  subject,
  action,
  projectId,
}: {
  subject: string;
  action: string;
  projectId: string | null;
}) {
  const text = UUID.test(subject) ? (
    <code title={subject} className="font-code text-[13px] whitespace-nowrap">
      …{subject.slice(-8)}
    </code>
  ) : (
    subject
  );
  const section = SECTIONS.find(({ of }) => action.startsWith(of));
  if (!section || projectId === null) return text;
  const place = `/projects/${projectId}/${section.path}`;
  return (
    <Link href={section.whole ? place : `${place}/${encodeURIComponent(subject)}`} className="underline">
      {text}
    </Link>
  );
}

function Details({ details }: { details: Record<string, unknown> }) {
  const told = Object.entries(details).filter(([, value]) => value !== null && value !== undefined);
  return (
    <span className="block max-w-[34rem] text-[13.5px] break-words text-ink-second">
      {told
        .map(([name, value]) => `${name} ${typeof value === 'object' ? JSON.stringify(value) : value}`)
        .join(', ')}
    </span>
  );
}
