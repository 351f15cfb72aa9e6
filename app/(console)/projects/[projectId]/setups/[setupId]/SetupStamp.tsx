'use client';

import { moment } from '@/app/ui/numbers';
import { Stamp } from '@/app/ui/Stamp';
import { SETUP_END } from '@/app/ui/setupEnd';
import { type Ending, useEnding } from './ending';
import type { ShownSetup } from './SetupSheet';

/** The verdict; or, once nobody may work from the setup any more, what ended it, with the verdict as what it was. */
export function SetupStamp({ setup, projectId }: { setup: ShownSetup; projectId: string }) {
  const ending = useEnding(setup, projectId);
  if (!ending) return <Stamp verdict={setup.verdict} reason={reasonOf(setup)} />;
  const { word, tone } = SETUP_END[ending.kind];
  return (
    <Stamp
      verdict={tone}
      word={word}
      reason={short(tellEnding(ending))}
      was={`The verdict was ${setup.verdict}: ${reasonOf(setup)}`}
    />
  );
}

/** When, by whom and why, as far as it is told. */
export function tellEnding({ at, by, why }: Ending): string {
  const event = [at ? moment(at) : null, by ? `by ${by}` : null].filter((part) => part !== null).join(' ');
  return [event, why].filter((part) => part).join(': ');
}

/** The first reason, short enough for a stamp. */
function reasonOf({ verdict, toleranceClass, reasons }: ShownSetup): string {
  if (verdict === 'pass') return `for ${toleranceClass}`;
  const [first] = reasons;
  return short(first?.text.split(/[;:.](?:\s|$)/)[0] ?? '');
}

function short(text: string): string {
  return text.length > 96 ? `${text.slice(0, 94)}…` : text;
}
