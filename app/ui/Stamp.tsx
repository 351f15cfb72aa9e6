import { HubShape } from './draw/HubShape';

const SHAPE = { pass: 'driven', hold: 'half', fail: 'struck' } as const;
const WORD = { pass: 'Pass', hold: 'Hold', fail: 'Fail' } as const;
const LOOK = {
  pass: 'text-pass bg-pass-soft',
  hold: 'text-hold bg-hold-soft',
  fail: 'text-fail bg-fail-soft',
} as const;

/** The verdict and its reason in one glance. */
export function Stamp({
  verdict,
  word,
  reason,
}: {
  verdict: 'pass' | 'hold' | 'fail';
  word?: string;
  reason?: string;
}) {
  return (
    <div
      className={`flex max-w-[24rem] shrink-0 items-center gap-3 rounded border-2 border-current py-2.5 pr-4 pl-3 ${LOOK[verdict]}`}
    >
      <HubShape shape={SHAPE[verdict]} size={32} />
      <div>
        <p className="font-head text-[26px] leading-none">{word ?? WORD[verdict]}</p>
        {reason ? <p className="mt-1 text-[13px] leading-tight font-medium">{reason}</p> : null}
      </div>
    </div>
  );
}
