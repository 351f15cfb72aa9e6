import { type InputHTMLAttributes, type ReactNode, useId } from 'react';

/** One thing to tick, with what it means beside it. */
export function Check({
  children,
  note,
  ...input
}: { children: ReactNode; note?: ReactNode } & InputHTMLAttributes<HTMLInputElement>) {
  const id = useId();
  return (
    <div className="flex items-start gap-2.5">
      <input id={id} type="checkbox" {...input} className="mt-0.5 size-4.5 shrink-0 accent-mark" />
      <label htmlFor={id} className="cursor-pointer leading-snug">
        {children}
        {note ? <span className="block text-[13.5px] text-ink-second">{note}</span> : null}
      </label>
    </div>
  );
}
