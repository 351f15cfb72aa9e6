import * as z from 'zod';

/** One place in a request and what is wrong with it. */
export const ProblemItem = z
  .object({
    pointer: z.string().meta({
      description:
        'JSON pointer into the body (RFC 6901), `?name` for a query parameter, `/rows/12/easting` for a table.',
      example: '/setups/0/shots/3/zenith',
    }),
    code: z.string().meta({ example: 'face_mismatch' }),
    detail: z.string().meta({ example: 'Face left with a zenith angle of 271.2°.' }),
    fix: z.string().meta({ example: 'Correct the face, or the zenith angle.' }),
  })
  .meta({ id: 'ProblemItem' });

export const Problem = z
  .object({
    type: z.string().meta({
      description: 'Address of the page that explains the code.',
      example: '/reference/problems/invalid',
    }),
    title: z.string().meta({ example: 'Something in the request is not right' }),
    status: z.int().meta({ example: 422 }),
    detail: z.string().meta({ example: 'One place in the body needs mending.' }),
    instance: z.string().meta({ example: '/api/v1/projects' }),
    code: z.string().meta({ example: 'invalid' }),
    requestId: z.string().meta({ example: '0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44' }),
    errors: z.array(ProblemItem).optional(),
  })
  .meta({ id: 'Problem', description: 'A problem document (RFC 9457).' });

export type ProblemItem = z.output<typeof ProblemItem>;
export type Problem = z.output<typeof Problem>;
