import * as z from 'zod';

/** Ids are opaque outside; inside they are UUIDs of version 7. */
export const Id = z
  .uuid()
  .meta({ description: 'Opaque id.', example: '0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44' });

/** Names that appear in paths: points, layers, instruments, machines. */
const NAME = /^[\p{L}\p{N}][\p{L}\p{N} ._-]{0,63}$/u;
/** Longer text is no name in any form, and bringing it to one takes a time that grows with its square. */
const LONGEST_UNFORMED = 1024;
export const Name = z
  .string()
  .transform((text) => (text.length > LONGEST_UNFORMED ? text : text.normalize('NFC')))
  .refine((text) => NAME.test(text), {
    error: 'Begin with a letter or digit; then letters, digits, space, . _ or -; 64 characters at most.',
    params: { code: 'name_invalid' },
  })
  .meta({
    type: 'string',
    description: 'Begins with a letter or digit; 64 characters at most.',
    example: 'HT-104',
  });

/** Ids that a client gives its own items. */
export const ClientId = z
  .string()
  .min(1)
  .max(128)
  .refine((text) => !/\p{C}/u.test(text), { error: 'Use printable characters only.' })
  .meta({
    description: 'Your own id of the item, unique within the project and kind once accepted.',
    example: 'st-7',
  });

export const Text = z.string().max(2000);
export const Title = z.string().trim().min(1).max(120);

const RFC3339 =
  /^(\d{4})-(0[1-9]|1[0-2])-(0[1-9]|[12]\d|3[01])[Tt]([01]\d|2[0-3]):[0-5]\d:([0-5]\d|60)(\.\d{1,9})?([Zz]|[+-]([01]\d|2[0-3]):[0-5]\d)$/;
const FIRST_YEAR = 1970;
const LAST_YEAR = 2199;

function isInstant(text: string): boolean {
  const match = RFC3339.exec(text);
  if (!match) return false;
  const [year, month, day] = [Number(match[1]), Number(match[2]), Number(match[3])];
  const leap = year % 4 === 0 && (year % 100 !== 0 || year % 400 === 0);
  const days = [31, leap ? 29 : 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31][month - 1];
  return day <= days && year >= FIRST_YEAR && year <= LAST_YEAR;
}

/** Instants as clients send them: an offset is required. */
export const Instant = z
  .string()
  .refine(isInstant, {
    error: `It is no time with an offset as RFC 3339 writes it, between the years ${FIRST_YEAR} and ${LAST_YEAR}.`,
    params: { code: 'time_invalid' },
  })
  .meta({
    type: 'string',
    format: 'date-time',
    description: 'RFC 3339 with an offset.',
    example: '2031-04-12T07:41:00-06:00',
  });

/** Instants as the hub answers them, in UTC. */
export const Moment = z
  .string()
  .meta({ format: 'date-time', description: 'RFC 3339 in UTC.', example: '2031-04-12T13:41:00.000000Z' });

export const Sha256 = z
  .string()
  .regex(/^[0-9a-f]{64}$/, { error: 'A SHA-256 is 64 hexadecimal digits in lower case.' })
  .meta({ example: '9f86d081884c7d659a2feaa0c55ad015a3bf4f1b2b0b822cd15d6c0b0f00a08a' });

/** Numbers far beyond anything on a site are a wrong unit or a wrong field. */
const LARGEST = 1e8;
export const Coordinate = z.number().min(-LARGEST).max(LARGEST);
export const Length = z.number().min(-LARGEST).max(LARGEST);
export const PositiveLength = z.number().gt(0).max(LARGEST);
export const NonNegativeLength = z.number().min(0).max(LARGEST);

export const Point = z
  .strictObject({ easting: Coordinate, northing: Coordinate, elevation: Coordinate })
  .meta({ id: 'Point' });
export const PlanPoint = z
  .strictObject({ easting: Coordinate, northing: Coordinate })
  .meta({ id: 'PlanPoint' });

/** One standard deviation per axis. */
export const Sigma = z
  .strictObject({ horizontal: z.number().gt(0).max(1000), vertical: z.number().gt(0).max(1000) })
  .meta({ id: 'Sigma', description: 'One standard deviation per axis, in the length unit of the document.' });

export const Verdict = z.enum(['pass', 'hold', 'fail']).meta({ id: 'Verdict' });

export const Note = z
  .object({ code: z.string(), text: z.string(), action: z.string().optional() })
  .meta({ id: 'Note', description: 'A finding in plain words, with what to do next.' });

/** A page of a list. */
export function page<T extends z.ZodType>(id: string, item: T) {
  return z
    .object({
      data: z.array(item),
      nextCursor: z
        .string()
        .nullable()
        .meta({ description: 'Send as ?cursor= for the next page; null at the end.' }),
    })
    .meta({ id });
}

export const PageQuery = z.strictObject({
  limit: z.coerce
    .number()
    .int()
    .min(1)
    .max(200)
    .default(50)
    .meta({ type: 'integer', description: 'Items a page.', example: 50 }),
  cursor: z.string().max(500).optional().meta({ description: 'From the last page’s nextCursor.' }),
});
