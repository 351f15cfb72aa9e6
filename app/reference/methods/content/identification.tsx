import { Formula, M } from '@/app/reference/methods/Formula';
import { figure } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import { FEWEST, STRAYS_ONE_IN, SURE } from '@/lib/compute/survey/identify';
import { ON_MARK } from '@/lib/compute/survey/identifySearch';
import { METHOD_IDENTIFIED, METHOD_VERSION } from '@/lib/services/setups/result';

export const identification: Method = {
  slug: 'identification',
  title: 'Targets by their geometry',
  lead: 'Shots without names: which control point each one hit, which hit none, how sure that is, and no answer where the control repeats itself.',
  group: 'Setups',
  carried: { method: METHOD_IDENTIFIED, version: METHOD_VERSION },
  body: (
    <>
      <Part title="Reflectors">
        <p>
          Shots to one place, in whatever face and set and at whatever target height, are one reflector. Its
          place in the instrument’s own frame has a standard deviation along the sight, across it and in
          height, from what is stated of instrument, reflector, air and refraction.
        </p>
      </Part>
      <Part title="Search">
        <p>
          A levelled instrument only turns and shifts: two reflectors keep their horizontal distance and their
          difference of heights. Each pair of control points with the same two, within the standard deviations
          of all four, fixes <M>{'E, N, H'}</M> and orientation; the other reflectors are looked for in that
          pose. Pairs of reflectors are chosen so that every admissible assignment holds one of them, so that
          nothing that fits is missed.
        </p>
      </Part>
      <Part title="Odds">
        <p>
          For <M>{'m'}</M> reflectors on control that lies <M>{String.raw`\rho`}</M> to the cubic metre within
          sight, among <M>{'N'}</M> points, with <M>{'n'}</M> the normal matrix of the four unknowns:
        </p>
        <Formula>{String.raw`\begin{aligned}\ln E = &-\tfrac12 v^\mathsf{T}Pv - (m-1)\ln\rho - \ln 2\pi N \\ &- \textstyle\sum \ln\bigl((2\pi)^{3/2}\sigma_a\sigma_c\sigma_h\bigr) + 2\ln 2\pi - \tfrac12\ln|n|\end{aligned}`}</Formula>
        <p>
          is the logarithm of how much better the assignment explains the shots than chance does. The margin
          is that of the best minus that of the second-best, or minus nothing where there is no other: between
          assignments of as many reflectors it is half the difference of the weighted squares.
        </p>
      </Part>
      <Part title="No choice">
        <Points>
          {[
            'Another assignment has the instrument stand elsewhere and leaves no more reflectors stray than may be: it could be true, though the best one fits better. Where a point is missing from a regular layout, the wrong assignment fits best.',
            'The margin is small: two points stand too near each other, or chance could have made it.',
            'A shot to a mark by its name decides, in the setup itself as a check or later: the shot whose reading differs most between the assignments is proposed.',
          ]}
        </Points>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Limits"
      rows={[
        { what: 'reflectors that must stand on control, the least', figure: FEWEST },
        { what: 'reflectors that may be stray', figure: `one in ${STRAYS_ONE_IN}` },
        { what: 'χ² (three degrees) of a reflector on its point', figure: figure(ON_MARK, 3) },
        { what: 'margin that is sure, ln 1000', figure: figure(SURE, 3) },
      ]}
    />
  ),
  assumes: [
    'The instrument is levelled, and its distances are right: a wrong prism constant leaves nothing that fits.',
    'Standard deviations of control are what they are stated to be.',
  ],
  limits: [
    'Only where no assignment keeps to that share may up to half of the reflectors be stray.',
    'Points at one place, within one standard deviation of their difference, are one: the trusted one, then the better known.',
    'Quarantined points are never found. A bumped mark is a stray, with the point that it misses.',
  ],
  units: 'The margin is a natural logarithm of odds.',
  sources: [
    'MacKay, Information Theory, Inference, and Learning Algorithms, ch. 28 (marginal likelihoods).',
    'Umeyama (1991), Least-squares estimation of transformation parameters between two point patterns.',
  ],
};
