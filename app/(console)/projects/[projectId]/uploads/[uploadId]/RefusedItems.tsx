'use client';

import Link from 'next/link';
import { useMemo, useState } from 'react';
import { Button } from '@/app/ui/form/Button';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { findPlace, treeOf } from './places';

const AT_A_TIME = 20;

/** Each refused item where it stands in the text, with what to do about it. */
export function RefusedItems({ refused, text }: { refused: readonly ProblemItem[]; text: string | null }) {
  const [shown, setShown] = useState(AT_A_TIME);
  const tree = useMemo(() => (text === null ? undefined : treeOf(text)), [text]);
  return (
    <section>
      <h2 className="mb-3 font-head text-[19px]">
        Refused{' '}
        <span className="font-text text-[13.5px] font-normal text-ink-second">
          {refused.length} {refused.length === 1 ? 'place' : 'places'}
        </span>
      </h2>
      <ol className="space-y-6">
        {refused.slice(0, shown).map((problem, i) => {
          const place = text === null ? null : findPlace(text, tree, problem.pointer);
          return (
            // biome-ignore lint/suspicious/noArrayIndexKey: the list never changes, and its items may be alike.
            <li key={i}>
              <p className="font-semibold">
                {problem.detail} <span className="font-normal text-ink-second">{problem.fix}</span>
              </p>
              <p className="text-[13.5px] text-ink-second">
                <code className="font-code text-[12.5px] break-all">
                  {problem.pointer || 'the whole body'}
                </code>
                {place ? `, line ${place.line}` : ''},{' '}
                <Link href={`/reference/problems/${problem.code}`} prefetch={false} className="underline">
                  {problem.code}
                </Link>
              </p>
              {place ? (
                <pre className="mt-2 rounded border border-rule bg-sheet px-3.5 py-2.5 font-code text-[12.5px] leading-relaxed break-all whitespace-pre-wrap text-ink-second">
                  {place.before}
                  <mark className="rounded-none bg-mark-soft font-code text-ink outline-2 outline-mark">
                    {place.marked}
                  </mark>
                  {place.after}
                </pre>
              ) : null}
            </li>
          );
        })}
      </ol>
      {refused.length > shown ? (
        <Button look="plain" small className="mt-4" onClick={() => setShown(shown + AT_A_TIME)}>
          Show more
        </Button>
      ) : null}
    </section>
  );
}
