'use client';

import { useEffect, useState } from 'react';
import { flushSync } from 'react-dom';
import { useRead } from '@/app/ui/data/queries';
import { Mark } from '@/app/ui/draw/Mark';
import type * as contracts from '@/openapi/contracts/projects';

/** With year and zone: paper outlives the day it was printed on. */
const PRINTED = new Intl.DateTimeFormat('en-GB', { dateStyle: 'medium', timeStyle: 'long' });

/** On paper alone: whose sheet this is, and when it left the printer. */
export function PrintHead({ projectId }: { projectId: string | undefined }) {
  const project = useRead<typeof contracts.getProject>(
    '/projects/{projectId}',
    { params: { projectId: projectId ?? '' } },
    projectId !== undefined,
  ).data;
  const [printedAt, setPrintedAt] = useState<string | null>(null);
  useEffect(() => {
    // The browser takes the page as it stands when the event ends.
    const note = () => flushSync(() => setPrintedAt(PRINTED.format(new Date())));
    window.addEventListener('beforeprint', note);
    return () => window.removeEventListener('beforeprint', note);
  }, []);
  return (
    <div className="mb-4 hidden items-center justify-between gap-6 border-b-[1.5px] border-ink pb-2 text-[13.5px] print:flex">
      <p className="flex items-center gap-2 font-semibold">
        <Mark size={18} />
        {project ? project.name : 'Hubtack'}
      </p>
      {printedAt ? <p>printed {printedAt}</p> : null}
    </div>
  );
}
