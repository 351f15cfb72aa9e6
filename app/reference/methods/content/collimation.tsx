import { Formula, M } from '@/app/reference/methods/Formula';
import { figure } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import { CRITICAL_W } from '@/lib/compute/statistics/distributions';
import { ALPHA, DRIFT_READINGS } from '@/lib/compute/survey/collimation';

export const collimation: Method = {
  slug: 'collimation-over-time',
  title: 'Collimation over time',
  lead: 'Whether collimation and vertical index of an instrument stand still from setup to setup, jumped at some day, or creep.',
  group: 'Readings',
  body: (
    <>
      <Part title="Readings">
        <p>
          Every setup that was read in both faces shows <M>{'2c'}</M> and the index, each with a standard
          deviation from the stated accuracy and the number of pairs.
        </p>
      </Part>
      <Part title="A jump">
        <p>
          The history is cut at the place where two means explain it best. With weights <M>{'W'}</M> before
          and after, and the scatter within them, which is never reckoned smaller than stated:
        </p>
        <Formula>{String.raw`w = \frac{\bar x_2 - \bar x_1}{b\sqrt{1/W_1 + 1/W_2}}, \qquad b = \max\Bigl(1, \sqrt{\frac{v^\mathsf{T}Pv}{n-2}}\Bigr)`}</Formula>
        <p>
          It counts where so much would come about by chance less often than {figure(ALPHA)} over all places
          where a jump might lie; by Student’s distribution where the scatter was estimated.
        </p>
      </Part>
      <Part title="A drift">
        <p>
          Without a jump, and from {DRIFT_READINGS} readings on, a weighted regression over the days. It
          counts beyond {CRITICAL_W} of its standard deviations.
        </p>
      </Part>
      <Part title="What matters">
        <p>
          Both count only where they are larger than what single faces are reckoned to leave in: what is
          certain and small moves no dirt. An error beyond {CRITICAL_W} times that allowance is called large.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Limits"
      rows={[
        { what: 'probability of calling chance a jump', figure: figure(ALPHA) },
        { what: 'readings that tell a drift', figure: DRIFT_READINGS },
        { what: 'standard deviations of a drift', figure: figure(CRITICAL_W) },
      ]}
    />
  ),
  assumes: ['Between two setups nobody adjusted the instrument, or a jump is what one expects to see.'],
  limits: [
    'Setups in one face show nothing of it.',
    'It tells of the instrument and corrects nothing: readings keep what they were read with.',
  ],
  units: 'Seconds of arc; days.',
  sources: [
    'Birge, The calculation of errors by the method of least squares (1932): scatter against stated accuracy.',
    'ISO 17123-3 (what a stated accuracy means).',
  ],
};
