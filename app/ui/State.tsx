import { HubShape, type Shape } from './draw/HubShape';

export type Tone = 'pass' | 'hold' | 'fail' | 'plain';

const COLOUR: Record<Tone, string> = {
  pass: 'text-pass',
  hold: 'text-hold',
  fail: 'text-fail',
  plain: 'text-ink-third',
};
const SHAPE: Record<Tone, Shape> = { pass: 'driven', hold: 'half', fail: 'struck', plain: 'empty' };

/** A state: shape, colour and word together, never colour alone. */
export function State({ tone, children, size }: { tone: Tone; children: string; size?: number }) {
  return (
    <span className={`inline-flex items-center gap-1.5 font-semibold ${COLOUR[tone]}`}>
      <HubShape shape={SHAPE[tone]} size={size} />
      {children}
    </span>
  );
}
