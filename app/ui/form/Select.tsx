import { type SelectHTMLAttributes, useId } from 'react';

export function Select({
  label,
  children,
  ...select
}: { label: string } & SelectHTMLAttributes<HTMLSelectElement>) {
  const id = useId();
  return (
    <div>
      <label htmlFor={id} className="mb-1 block font-head text-[13px] text-ink-second">
        {label}
      </label>
      <select
        id={id}
        {...select}
        className="w-full cursor-pointer rounded border border-rule-strong bg-sheet px-3 py-2.5 text-ink"
      >
        {children}
      </select>
    </div>
  );
}
