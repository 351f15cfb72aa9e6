'use client';

import Link from 'next/link';
import { usePathname, useRouter } from 'next/navigation';
import { useId } from 'react';
import { usePages } from '@/app/ui/data/queries';
import type * as contracts from '@/openapi/contracts/projects';

/** The project at hand, and the way to another one: the same section of it. */
export function ProjectSwitch({ projectId }: { projectId: string | undefined }) {
  const id = useId();
  const router = useRouter();
  const pathname = usePathname();
  const { rows } = usePages<typeof contracts.listProjects>('/projects', { query: { limit: 200 } });
  if (rows.length === 0) return <div className="md:h-16" />;
  if (!projectId) {
    return (
      <p className="px-5 pb-3 md:px-0 md:py-5">
        <Link href="/projects" className="font-semibold text-ink underline">
          Choose a project
        </Link>
      </p>
    );
  }
  const section = pathname.split('/')[3] ?? 'setups';
  return (
    <div className="px-5 pb-3 md:py-5 md:pr-5 md:pl-0">
      <label htmlFor={id} className="block font-head text-[12px] text-ink-third">
        Project
      </label>
      <select
        id={id}
        value={projectId}
        onChange={(event) => router.push(`/projects/${event.target.value}/${section}`)}
        className="w-full cursor-pointer truncate rounded border border-transparent bg-transparent py-0.5 font-semibold text-ink hover:border-rule-strong"
      >
        {rows.map((project) => (
          <option key={project.id} value={project.id} className="bg-sheet">
            {project.name}
          </option>
        ))}
      </select>
    </div>
  );
}
