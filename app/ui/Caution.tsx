/** Stands beside the button that it concerns. */
export function Caution({ sentences }: { sentences: readonly string[] }) {
  return (
    <ul className="space-y-1 rounded border-[1.5px] border-hold bg-hold-soft px-4 py-3 text-sm leading-snug">
      {sentences.map((sentence, i) => (
        <li key={sentence} className={i === 0 ? 'font-semibold text-hold' : undefined}>
          {sentence}
        </li>
      ))}
    </ul>
  );
}
