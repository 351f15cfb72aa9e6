import type { Config } from 'tailwindcss';

/** Colours are roles, not hues: app/globals.css gives them their value by day and by night. */
const role = (name: string) => `var(--${name})`;

export default {
  content: ['./app/**/*.{ts,tsx}'],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      paper: role('paper'),
      sheet: role('sheet'),
      raised: role('raised'),
      rule: { DEFAULT: role('rule'), strong: role('rule-strong') },
      ink: { DEFAULT: role('ink'), second: role('ink-second'), third: role('ink-third') },
      mark: { DEFAULT: role('mark'), soft: role('mark-soft') },
      pass: { DEFAULT: role('pass'), soft: role('pass-soft') },
      hold: { DEFAULT: role('hold'), soft: role('hold-soft') },
      fail: { DEFAULT: role('fail'), soft: role('fail-soft') },
      cut: role('cut'),
      fill: role('fill'),
    },
    fontFamily: {
      text: ['var(--font-text)', 'system-ui', 'sans-serif'],
      head: ['var(--font-head)', 'var(--font-text)', 'system-ui', 'sans-serif'],
      code: ['var(--font-code)', 'ui-monospace', 'monospace'],
    },
    borderRadius: { none: '0', DEFAULT: '3px' },
  },
} satisfies Config;
