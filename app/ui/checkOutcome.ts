import type { Tone } from './State';

/** What a check of a setup showed, the worst first. */
const OUTCOMES = {
  over: { tone: 'fail', word: 'over' },
  disagrees: { tone: 'hold', word: 'disagrees' },
  notCapable: { tone: 'hold', word: 'could not tell' },
  agreed: { tone: 'pass', word: 'agreed' },
} as const satisfies Record<string, { tone: Tone; word: string }>;

type Outcome = keyof typeof OUTCOMES;

/** The worst of several outcomes; null where an axis was not checked. */
export function worstOutcome(outcomes: readonly (Outcome | null)[]): { tone: Tone; word: string } {
  const order = Object.keys(OUTCOMES) as Outcome[];
  const worst = order.find((outcome) => outcomes.includes(outcome));
  return worst ? OUTCOMES[worst] : { tone: 'plain', word: 'nothing checked' };
}
