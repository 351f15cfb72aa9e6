import { Formula, M } from '@/app/reference/methods/Formula';
import { millimetres } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import { NONLINEAR } from '@/lib/compute/survey/leaveOneOut';

export const leaveOneOut: Method = {
  slug: 'leave-one-out',
  title: 'Every mark left out in turn',
  lead: 'How far the station moves without each of its marks. It is the honest measure of redundancy: a mark that carries the setup alone shows, however many times it was shot.',
  group: 'Setups',
  body: (
    <>
      <Part title="The shift">
        <p>
          A mark with all its readings, its coordinates and its reflectors is one block of the normal
          equations. Its part of the reduced equations is taken out again, and one Gauss-Newton step of what
          is left, from the solution of all, gives the shift:
        </p>
        <Formula>{String.raw`\bigl(S - S_m\bigr)\,\mathrm{d}x_{(m)} = t - t_m`}</Formula>
        <p>
          <M>{'S'}</M> and <M>{'t'}</M> are the normal equations of the shared unknowns with all marks
          eliminated, <M>{'S_m'}</M> and <M>{'t_m'}</M> the share of mark <M>{'m'}</M>. The horizontal length
          and the signed height of the shift are answered.
        </p>
      </Part>
      <Part title="When one step is not enough">
        <p>
          The step is exact but for shift² over distance. Where that would count, the rest is adjusted anew
          without the mark.
        </p>
      </Part>
      <Part title="When nothing is left">
        <p>
          Where the other marks do not determine the station, the answer is null: nothing checks that mark.
          Where they determine it in plan and not in height, only the height is null.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Limit of the single step"
      rows={[{ what: 'shift² over the distance to the nearest other mark', figure: millimetres(NONLINEAR) }]}
    />
  ),
  assumes: ['Distinct marks fail apart from each other: two on one fence post are one.'],
  limits: [
    'It finds the mark that the setup hangs on, not the mark that is wrong: that is for the residuals and the explanations.',
  ],
  units: 'The project’s length unit.',
  sources: [
    'Cook, Detection of influential observation in linear regression (1977): the effect of leaving out, here by block.',
    'Tested against real fits without the mark, with errors of up to metres in it.',
  ],
};
