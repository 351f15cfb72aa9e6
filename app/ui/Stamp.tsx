import type { ReactNode } from 'react';
import { HubShape } from './draw/HubShape';

const SHAPE = { pass: 'driven', hold: 'half', fail: 'struck' } as const;
const WORD = { pass: 'Pass', hold: 'Hold', fail: 'Fail' } as const;
const LOOK = {
  pass: 'text-pass bg-pass-soft',
  hold: 'text-hold bg-hold-soft',
  fail: 'text-fail bg-fail-soft',
} as const;

/** The verdict and its reason in one glance; `was` is a verdict that something later has overruled. */
export function Stamp({
  verdict,
  word,
  reason,
  was,
}: {
  verdict: 'pass' | 'hold' | 'fail';
  word?: string;
  reason?: ReactNode;
  was?: string;
}) {
  return (
    <div
      className={`flex max-w-[24rem] shrink-0 items-center gap-3 rounded border-2 border-current py-2.5 pr-4 pl-3 max-md:max-w-full max-md:shrink ${LOOK[verdict]}`}
    >
      <HubShape shape={SHAPE[verdict]} size={32} />
      <div className="min-w-0">
        <p className="font-head text-[26px] leading-none">{word ?? WORD[verdict]}</p>
        {reason ? <p className="mt-1 text-[13px] leading-tight font-medium">{reason}</p> : null}
        {was ? (
          <p className="mt-1.5 border-t border-current pt-1.5 text-[13px] leading-tight text-ink-second">
            {was}
          </p>
        ) : null}
      </div>
    </div>
  );
}
