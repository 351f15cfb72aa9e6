'use client';

import Link from 'next/link';
import { usePages } from '@/app/ui/data/queries';
import { useCan } from '@/app/ui/data/whoami';
import { Empty, Failure, Skeleton } from '@/app/ui/Notice';
import { moment, unitName } from '@/app/ui/numbers';
import { Table } from '@/app/ui/table/Table';
import type * as contracts from '@/openapi/contracts/projects';
import { NewProject } from './NewProject';

export function Projects() {
  const { rows, error, isPending, refetch, hasNextPage, isFetchingNextPage, fetchNextPage } = usePages<
    typeof contracts.listProjects
  >('/projects', { query: { limit: 200 } });
  const mayMake = useCan('projects:write');
  if (error) return <Failure error={error} retry={refetch} />;
  if (isPending) return <Skeleton />;
  return (
    <div className="space-y-10">
      {rows.length === 0 ? (
        <Empty title="No project yet">
          {mayMake
            ? 'Open the first one below, or post one with an API key.'
            : 'Ask a surveyor or an administrator to open one.'}
        </Empty>
      ) : (
        <Table
          caption="Projects"
          rows={rows}
          keyOf={(project) => project.id}
          more={{ has: hasNextPage, busy: isFetchingNextPage, read: fetchNextPage }}
          columns={[
            {
              name: 'Name',
              value: (project) => project.name,
              cell: (project) => (
                <Link href={`/projects/${project.id}/setups`} className="font-semibold text-ink">
                  {project.name}
                </Link>
              ),
            },
            { name: 'Unit', value: (project) => unitName(project.lengthUnit) },
            {
              name: 'Classes',
              wide: true,
              value: (project) => project.toleranceClasses.map((c) => c.name).join(', '),
            },
            {
              name: 'Opened',
              value: (project) => project.createdAt,
              cell: (project) => moment(project.createdAt),
            },
          ]}
        />
      )}
      {mayMake ? <NewProject /> : null}
    </div>
  );
}
