'use client';

import Link from 'next/link';
import { signedOffset } from '@/app/ui/layerWords';
import { moment } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import { SETUP_END } from '@/app/ui/setupEnd';
import { useCrews, useEnding } from './ending';
import type { ShownSetup } from './SetupSheet';
import { tellEnding } from './SetupStamp';

/** Who may work from a setup until when; or what ended that, and which crews know. */
export function InForce({ setup, projectId }: { setup: ShownSetup; projectId: string }) {
  const ending = useEnding(setup, projectId);
  const crews = useCrews(setup, projectId);
  const { release, supersededBy } = setup;
  if (!ending)
    return release ? <p className="mt-3 text-ink-second">{releaseOf(setup, 'Released')}.</p> : null;
  const { word, tone } = SETUP_END[ending.kind];
  const told = tellEnding(ending);
  return (
    <div className="mt-3 space-y-2">
      <p className="font-medium">
        <State tone={tone}>{word}</State>
        {told ? ` ${told}` : ''}
      </p>
      {crews.length > 0 ? (
        <ul className="border-t border-rule">
          {crews.map((crew) => (
            <li
              key={crew.id}
              className="flex flex-wrap items-baseline justify-between gap-x-4 border-b border-rule py-2"
            >
              <span className="min-w-0 basis-[14rem] grow">{crew.text}</span>
              <State tone={crew.acknowledgedAt === null ? 'hold' : 'pass'}>
                {crew.acknowledgedAt === null ? 'waits' : `answered ${moment(crew.acknowledgedAt)}`}
              </State>
            </li>
          ))}
        </ul>
      ) : null}
      {supersededBy ? (
        <p>
          <Link href={`/projects/${projectId}/setups/${supersededBy}`} className="font-semibold underline">
            Use the refit
          </Link>
        </p>
      ) : null}
      {release ? <p className="text-ink-second">{releaseOf(setup, 'It was released')}.</p> : null}
    </div>
  );
}

function releaseOf({ release, units }: ShownSetup, begin: string): string {
  if (!release) return '';
  const { machine, layer, offset, releasedAt, releasedBy, validUntil } = release;
  return [
    `${begin} ${moment(releasedAt)} by ${releasedBy}${machine ? ` to ${machine}` : ''}`,
    layer === null ? null : `${layer}${offset === null ? '' : ` with ${signedOffset(offset, units.length)}`}`,
    `until ${moment(validUntil)}`,
  ]
    .filter((part) => part !== null)
    .join(', ');
}
