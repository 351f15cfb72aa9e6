/** Hub shapes of the states of control. */
export const CONTROL_TONE = { trusted: 'pass', suspect: 'hold', quarantined: 'fail' } as const;
export type ControlState = keyof typeof CONTROL_TONE;

/** What a state means for a setup. */
export const CONTROL_MEANING: Record<ControlState, string> = {
  trusted: 'counts in every setup',
  suspect: 'takes part, proves nothing',
  quarantined: 'takes no part at all',
};
