import * as z from 'zod';
import { Id, Moment, Note, Verdict } from './primitives';

export const AffectedKind = z.enum(['setup', 'release', 'benchCheck', 'gradeCheck']).meta({
  id: 'AffectedKind',
  description: 'release: a machine that was let work from a setup, on a layer.',
});

export const AffectedItem = z
  .object({
    kind: AffectedKind,
    id: z.string().meta({ description: 'A release has the id of its setup and its number.' }),
    at: Moment.meta({ description: 'When it was observed, or took force.' }),
    setupId: Id.nullable(),
    station: z.string().nullable(),
    machine: z.string().nullable(),
    layer: z.string().nullable(),
    verdict: Verdict.nullable().meta({ description: 'As it was given.' }),
    href: z.string().meta({ description: 'Where it is read.', example: '/api/v1/projects/…/setups/…' }),
  })
  .meta({ id: 'AffectedItem' });

export const Affected = z
  .object({
    subject: z.object({
      kind: z.enum(['setup', 'controlPoint']),
      name: z.string().meta({ description: 'Station of the setup, or name of the point.' }),
      status: z.string().meta({ description: 'Its status now.' }),
    }),
    since: z
      .object({
        at: Moment.nullable().meta({ description: 'Null: everything is affected.' }),
        checkId: Id.nullable().meta({ description: 'The check that still agreed.' }),
        setupId: Id.nullable().meta({ description: 'The setup that it belongs to, or that still agreed.' }),
        text: z.string(),
      })
      .meta({ description: 'When it was last known to be good; what came after is affected.' }),
    counts: z.object({ setup: z.int(), release: z.int(), benchCheck: z.int(), gradeCheck: z.int() }),
    actions: z.array(Note).meta({ description: 'What to do, the most urgent first.' }),
    data: z.array(AffectedItem).meta({ description: 'Oldest first.' }),
    nextCursor: z
      .string()
      .nullable()
      .meta({ description: 'Send as ?cursor= for the next page; null at the end.' }),
  })
  .meta({
    id: 'Affected',
    description:
      'Everything that hangs on a setup or a control point since it was last known to be good: to be stopped, benched or shot again where it is no longer trusted.',
  });
