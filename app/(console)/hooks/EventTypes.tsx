/** What a hook is told of. */
export function EventTypes({ types }: { types: readonly string[] | null }) {
  if (types === null) return 'everything';
  return (
    <span className="flex max-w-[26rem] flex-wrap gap-1">
      {types.map((type) => (
        <span
          key={type}
          className="rounded border border-rule-strong px-1.5 py-0.5 font-head text-[12.5px] text-ink-second"
        >
          {type.replace('.*', '').replace('.', ' ')}
        </span>
      ))}
    </span>
  );
}
