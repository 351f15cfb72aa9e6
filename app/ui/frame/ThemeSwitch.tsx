'use client';

import { useState } from 'react';

const THEMES = [
  { value: 'system', name: 'As the system' },
  { value: 'day', name: 'Day' },
  { value: 'night', name: 'Night' },
] as const;
type Theme = (typeof THEMES)[number]['value'];

function current(): Theme {
  if (typeof document === 'undefined') return 'system';
  return (document.documentElement.dataset.theme as Theme | undefined) ?? 'system';
}

/** Day, night, or as the system says; remembered by the browser; public/theme.js sets it before the first paint. */
export function ThemeSwitch() {
  const [theme, setTheme] = useState<Theme>(current);
  function choose(next: Theme) {
    setTheme(next);
    if (next === 'system') delete document.documentElement.dataset.theme;
    else document.documentElement.dataset.theme = next;
    localStorage.setItem('hubtack-theme', next);
  }
  return (
    <label className="flex items-center gap-2 text-[13.5px] text-ink-second">
      Theme
      <select
        suppressHydrationWarning
        value={theme}
        onChange={(event) => choose(event.target.value as Theme)}
        className="cursor-pointer rounded border border-rule-strong bg-sheet px-1.5 py-1 text-ink"
      >
        {THEMES.map(({ value, name }) => (
          <option key={value} value={value}>
            {name}
          </option>
        ))}
      </select>
    </label>
  );
}
