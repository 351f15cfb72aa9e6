import { type InputHTMLAttributes, useId } from 'react';

export function Field({ label, ...input }: { label: string } & InputHTMLAttributes<HTMLInputElement>) {
  const id = useId();
  return (
    <div>
      <label htmlFor={id} className="mb-1 block font-head text-[13px] text-ink-second">
        {label}
      </label>
      <input
        id={id}
        {...input}
        className="w-full rounded border border-rule-strong bg-sheet px-3 py-2.5 text-ink outline-offset-1 focus:border-ink"
      />
    </div>
  );
}
