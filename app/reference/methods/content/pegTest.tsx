import { Formula, M } from '@/app/reference/methods/Formula';
import { arcseconds, figure, metres } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import { COLLIMATION_LIMIT, UNTESTED_COLLIMATION } from '@/lib/compute/survey/levelling/accuracy';
import { LEAST_ARM } from '@/lib/compute/survey/levelling/pegTest';

export const pegTest: Method = {
  slug: 'two-peg-test',
  title: 'Two-peg test',
  lead: 'Whether the line of sight of a level is level: two staffs read from the middle and from near one of them, any number of times.',
  group: 'Levels and control',
  body: (
    <>
      <Part title="Standings">
        <p>
          Every standing gives one equation in the difference of heights of the pegs and the rise <M>{'c'}</M>{' '}
          of the line of sight per metre, once curvature and refraction are off:
        </p>
        <Formula>{String.raw`a - b = \Delta h + c\,(d_A - d_B)`}</Formula>
        <p>
          From the middle <M>{'c'}</M> falls out; from beside a peg it stays in. Both unknowns are found by
          least squares, so that repeats and further standings may come along, and where there are three or
          more they test each other by χ².
        </p>
      </Part>
      <Part title="Verdict">
        <p>
          By the probability that <M>{'c'}</M> lies within its limit, as a grade check by its tolerance: a
          level that passes is within the limit at 95 %. Where standings disagree the standard deviation grows
          by <M>{String.raw`\sigma_0`}</M>, and a pass becomes a hold.
        </p>
      </Part>
      <Part title="What to set">
        <p>
          The reading that an adjusted level shows on the farther staff of the last standing. Curvature and
          refraction stay in it, for an adjusted line is horizontal:
        </p>
        <Formula>{String.raw`a_\mathrm{wanted} = a - c\,d_A`}</Formula>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Collimation of a level (common practice)"
      rows={[
        {
          what: 'limit',
          figure: `${figure(COLLIMATION_LIMIT * 50_000)} mm over 50 m, ${arcseconds(COLLIMATION_LIMIT)}`,
        },
        {
          what: 'left by a level that was never tested, one σ',
          figure: `${figure(UNTESTED_COLLIMATION * 50_000)} mm over 50 m`,
        },
        {
          what: 'differences of distances apart by',
          figure: metres(LEAST_ARM),
          note: 'less tells no collimation',
        },
      ]}
    />
  ),
  assumes: ['The pegs stand firm. The collimation does not change with focus.'],
  limits: [
    'Two standings determine both unknowns and test nothing.',
    'It tests the line of sight, not the compensator: tilt the level and read again.',
  ],
  units: 'The project’s length unit; the collimation in seconds of arc.',
  sources: [
    'ISO 17123-2 (simplified test); common practice of the two-peg test.',
    'JCGM 106:2012 (verdict).',
  ],
};
