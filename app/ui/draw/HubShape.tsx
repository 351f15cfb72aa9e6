/**
 * A hub from above: driven with its tack, half, or struck through. The same three shapes serve verdicts and the states
 * of keys, control and uploads, always beside a word.
 */
export type Shape = 'driven' | 'half' | 'struck' | 'empty';

export function HubShape({ shape, size = 14 }: { shape: Shape; size?: number }) {
  return (
    <svg width={size} height={size} viewBox="0 0 24 24" aria-hidden="true" className="shrink-0">
      {shape === 'driven' ? (
        <>
          <rect x="1" y="1" width="22" height="22" fill="currentColor" />
          <circle cx="12" cy="12" r="4.4" fill="var(--paper)" />
        </>
      ) : (
        <rect
          x="2.2"
          y="2.2"
          width="19.6"
          height="19.6"
          fill="none"
          stroke="currentColor"
          strokeWidth="2.4"
        />
      )}
      {shape === 'half' ? <path d="M2.2 21.8 21.8 2.2H2.2Z" fill="currentColor" /> : null}
      {shape === 'struck' ? (
        <path d="m7 7 10 10M17 7 7 17" stroke="currentColor" strokeWidth="3.2" strokeLinecap="square" />
      ) : null}
    </svg>
  );
}
