'use client';

import type { ReactNode } from 'react';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { Refusal } from './data/call';
import { WaysBack } from './frame/WaysBack';

/** Nothing here yet, and what to do about it. */
export function Empty({ title, children }: { title: string; children?: ReactNode }) {
  return (
    <div className="rounded border border-dashed border-rule-strong px-6 py-10 text-center">
      <p className="font-head text-[19px]">{title}</p>
      <div className="mx-auto mt-2 max-w-[52ch] text-ink-second">{children}</div>
    </div>
  );
}

/** What went wrong, what to do, and the request id to report. */
export function Failure({
  error,
  retry,
  sayItem,
}: {
  error: Error;
  retry?: () => void;
  /** Words for a problem's place and mending, where a person sees no JSON. */
  sayItem?: (item: ProblemItem) => string;
}) {
  const problem = error instanceof Refusal ? error.problem : null;
  const title =
    problem === null
      ? 'The hub cannot be reached'
      : problem.status === 403
        ? 'Not allowed for your role'
        : problem.status === 404
          ? 'There is no such thing here'
          : problem.title;
  return (
    <div role="alert" className="rounded border border-fail bg-fail-soft px-5 py-4">
      <p className="font-head text-[19px] text-fail">{title}</p>
      <p className="mt-1">
        {problem ? problem.detail : 'Check the connection. What is shown may be out of date.'}
      </p>
      {problem?.errors ? (
        <ul className="mt-2 list-disc pl-5">
          {problem.errors.slice(0, 12).map((item) => (
            <li key={`${item.pointer}${item.code}`}>
              {sayItem ? (
                sayItem(item)
              ) : (
                <>
                  {item.pointer ? <code className="font-code text-[13px]">{item.pointer}</code> : null}{' '}
                  {item.detail} {item.fix}
                </>
              )}
            </li>
          ))}
        </ul>
      ) : null}
      <p className="mt-2 text-[13.5px] text-ink-second">
        {problem ? (
          <>
            <a className="underline" href={problem.type}>
              {problem.code}
            </a>
            , request <code className="font-code text-[12.5px]">{problem.requestId}</code>
          </>
        ) : null}
      </p>
      {retry ? (
        <p className="mt-3 flex flex-wrap gap-x-6 gap-y-2 font-semibold">
          <button type="button" onClick={retry} className="cursor-pointer font-semibold underline">
            Try again
          </button>
          {problem?.status === 404 ? <WaysBack /> : null}
        </p>
      ) : null}
    </div>
  );
}

const WIDTHS = [88, 71, 80, 63, 76, 58, 84, 67];

/** The shape of what is being read. */
export function Skeleton({ lines = 6 }: { lines?: number }) {
  return (
    <div role="status" aria-label="Reading" className="animate-pulse motion-reduce:animate-none">
      {WIDTHS.slice(0, lines).map((width) => (
        <div key={width} className="border-b border-rule py-3">
          <div className="h-4 rounded bg-rule" style={{ width: `${width}%` }} />
        </div>
      ))}
    </div>
  );
}
