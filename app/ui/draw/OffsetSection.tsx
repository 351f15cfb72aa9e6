/** A layer under or over its surface, seen from the side: the surface dashed, the layer solid. Not to scale. */
export function OffsetSection({ offset }: { offset: number }) {
  const surface = offset > 0 ? 20 : 8;
  const layer = offset === 0 ? surface : offset > 0 ? 8 : 20;
  return (
    <svg viewBox="0 0 44 28" width="44" height="28" aria-hidden="true">
      <path d={`M2 ${surface}l20 -3 20 3`} fill="none" stroke="var(--ink-third)" strokeDasharray="3 3" />
      <path d={`M2 ${layer}l20 -3 20 3`} fill="none" stroke="var(--ink)" strokeWidth="2.2" />
    </svg>
  );
}
