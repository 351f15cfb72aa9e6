import { Formula, M } from '@/app/reference/methods/Formula';
import { percent } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Part } from '@/app/reference/methods/parts';
import { FALSE_DRIFT } from '@/lib/compute/survey/drift';

export const setupDrift: Method = {
  slug: 'setup-drift',
  title: 'Drift of a setup',
  lead: 'Marks of the fit shot again: has the instrument shifted, sunk or turned since, by how much, and is that more than chance?',
  group: 'Setups',
  body: (
    <>
      <Part title="Model">
        <p>
          Observed is the polar position of each reflector from the fitted station minus its published mark.
          Unknown are the errors of station <M>{String.raw`\delta`}</M> and marks{' '}
          <M>{String.raw`\varepsilon`}</M>, held by the covariance that the fit left both with, and the drift{' '}
          <M>{String.raw`\nabla`}</M>:
        </p>
        <Formula>{String.raw`d = \varepsilon - J\,(\delta + \nabla) + e`}</Formula>
        <p>
          What the fit already had wrong cancels as far as it had it: a mark of the fit tells a change,
          whatever its coordinates are worth. Shift, rise and turn are later minus first. A turn of a degree
          is not small, so the answer is estimated once more about itself.
        </p>
      </Part>
      <Part title="One mark or more">
        <p>
          Two marks or more tell all of it. One mark cannot tell a turn from a shift: then the instrument is
          taken to stand on its place, and turn and rise are told.
        </p>
      </Part>
      <Part title="Test">
        <Formula>{String.raw`T = \nabla^\mathsf{T} Q_\nabla^{-1} \nabla`}</Formula>
        <p>
          against <M>{String.raw`\chi^2`}</M> with as many degrees of freedom as were estimated: an instrument
          that stands still seems to drift in {percent(FALSE_DRIFT)} of its checks.
        </p>
      </Part>
    </>
  ),
  assumes: [
    'Reflectors were set up anew for the later shots: their centring and height count again.',
    'The marks stood meanwhile. Where one alone did not, the explanation names it instead.',
  ],
  limits: [
    'Drift is no proof of the setup: all of its marks may be wrong together. An independent check is.',
  ],
  units: 'Shift and rise in the project’s length unit, the turn in seconds of arc, clockwise.',
  sources: [
    'Teunissen, Testing Theory, ch. 4 (faults as further unknowns).',
    'Tested on simulated setups that were kicked, turned, or left alone.',
  ],
};
