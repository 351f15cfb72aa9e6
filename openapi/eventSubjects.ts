/** What events are about: the part of their type before the dot. */
export const EVENT_SUBJECTS = [
  'setup',
  'withdrawal',
  'grade',
  'bench',
  'levelRun',
  'pegTest',
  'adjustment',
  'upload',
  'control',
  'instrument',
  'surface',
  'layer',
  'job',
  'project',
  'person',
  'session',
  'apiKey',
  'webhookEndpoint',
  'organization',
] as const;

export type EventSubject = (typeof EVENT_SUBJECTS)[number];
