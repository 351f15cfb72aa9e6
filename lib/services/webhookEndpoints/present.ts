import type * as z from 'zod';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import type { Note } from '@/openapi/schemas/primitives';
import type { WebhookEndpoint } from '@/openapi/schemas/webhook';
import type { EndpointRow } from './load';

type Words = z.output<typeof Note>;

const DISABLED: Record<NonNullable<EndpointRow['disabledReason']>, Words> = {
  by_request: {
    code: 'by_request',
    text: 'It was switched off by hand.',
    action: 'Switch it on again; then replay the time between, if it is wanted.',
  },
  gone: {
    code: 'gone',
    text: 'The receiver answered 410: it wants no more messages.',
    action: 'If that was a mistake, mend the receiver, send a test, and switch it on again.',
  },
  failing: {
    code: 'failing',
    text: 'A message was given up after ten attempts in three days, and none got through meanwhile.',
    action:
      'Look at the answers of the last deliveries, mend the receiver, send a test, switch it on, replay.',
  },
};

const FAILING: Words = {
  code: 'failing',
  text: 'The last messages did not get through; they are tried again.',
  action: 'Look at the answers of the last deliveries.',
};

export function presentEndpoint(row: EndpointRow, now: Date): z.output<typeof WebhookEndpoint> {
  const { enabled, failingSince, previousSecretEndsAt } = row;
  const overlaps = previousSecretEndsAt !== null && new Date(previousSecretEndsAt) > now;
  return {
    id: row.id,
    url: row.url,
    description: row.description,
    eventTypes: row.eventTypes,
    projectIds: row.projectIds,
    enabled,
    status: enabled ? (failingSince === null ? 'active' : 'failing') : 'disabled',
    reason: enabled ? (failingSince === null ? null : FAILING) : DISABLED[row.disabledReason ?? 'by_request'],
    failingSince: asMomentOrNull(failingSince),
    disabledAt: asMomentOrNull(row.disabledAt),
    lastDeliveredAt: asMomentOrNull(row.lastDeliveredAt),
    secret: {
      madeAt: asMoment(row.secretMadeAt),
      previousEndsAt: overlaps ? asMoment(previousSecretEndsAt) : null,
    },
    createdAt: asMoment(row.createdAt),
    updatedAt: asMoment(row.updatedAt),
  };
}
