interface Finding {
  code: string;
  text: string;
  action?: string;
}

/** Why a verdict is what it is; what was assumed stands under it. */
export function ReasonList({ reasons, notes }: { reasons: readonly Finding[]; notes: readonly Finding[] }) {
  return (
    <section>
      <h2 className="mb-1 font-head text-[19px]">Why</h2>
      <ul>
        {reasons.map((reason) => (
          <li key={`${reason.code}${reason.text}`} className="border-b border-rule py-3">
            <p className="font-semibold">{reason.text}</p>
            {reason.action ? <p className="text-ink-second">{reason.action}</p> : null}
          </li>
        ))}
        {notes.map((note) => (
          <li key={`${note.code}${note.text}`} className="border-b border-rule py-3 text-ink-second">
            {note.text} {note.action}
          </li>
        ))}
      </ul>
    </section>
  );
}
