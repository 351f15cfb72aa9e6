import type { ButtonHTMLAttributes } from 'react';

const LOOK = {
  main: 'border-ink bg-ink text-paper',
  plain: 'border-ink bg-transparent text-ink',
  danger: 'border-fail bg-transparent text-fail',
} as const;

export function Button({
  look = 'main',
  small = false,
  className = '',
  ...button
}: { look?: keyof typeof LOOK; small?: boolean } & ButtonHTMLAttributes<HTMLButtonElement>) {
  const size = small ? 'px-3 py-2 text-sm' : 'px-4.5 py-3 text-[15px]';
  return (
    <button
      type="button"
      {...button}
      className={`cursor-pointer rounded border-[1.5px] leading-none font-semibold disabled:cursor-not-allowed disabled:opacity-55 print:hidden ${size} ${LOOK[look]} ${className}`}
    />
  );
}
