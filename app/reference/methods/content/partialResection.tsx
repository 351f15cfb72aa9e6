import { Formula, M } from '@/app/reference/methods/Formula';
import { figure, percent } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import { NEAR_CIRCLE, ON_CIRCLE, UNDETERMINED } from '@/lib/compute/survey/dangerCircle';
import { RULED_OUT } from '@/lib/compute/survey/otherStations';

export const partialResection: Method = {
  slug: 'directions-or-distances-alone',
  title: 'Directions or distances alone',
  lead: 'The same free station where some sights, or all of them, have only a direction or only a distance: start values from loci, the danger circle, and the second station that the same shots may mean.',
  group: 'Setups',
  body: (
    <>
      <Part title="Start values">
        <p>
          A distance puts the station on a circle round its mark. Two directions put it on the circle through
          their marks that sees them under the angle between:
        </p>
        <Formula>{String.raw`\text{radius} = \frac{\overline{AB}}{2\,\sin\alpha}`}</Formula>
        <p>
          All places where such circles meet are candidates, and so is the place that each pair of marks with
          direction and distance leads to. Each stands on two or three marks only, so that some are free of
          whatever is wrong with one of them; then all sights vote on each. One wrong name among five does not
          spoil the start.
        </p>
      </Part>
      <Part title="The danger circle">
        <p>
          From any place on the circle through its marks the same directions are read. There neither the
          station nor its standard deviations mean anything: where the ellipse says so the setup is refused,
          and near the circle it is held.
        </p>
      </Part>
      <Part title="Two stations">
        <p>
          Two distances meet in two places. Every other place from which the adjustment comes out within{' '}
          <M>{String.raw`\Delta(v^\mathsf{T}Pv)`}</M> ≤ {RULED_OUT} of the best is named, and the setup is
          held: one more sight would decide.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Common practice, as parts of the circle’s radius"
      rows={[
        { what: 'marks further from their common circle make none', figure: percent(ON_CIRCLE) },
        { what: 'a station stands near the circle within', figure: percent(NEAR_CIRCLE) },
        { what: 'no position, with a standard deviation over', figure: percent(UNDETERMINED) },
        {
          what: 'a second station is ruled out beyond Δ(vᵀPv)',
          figure: figure(RULED_OUT),
          note: 'χ² of two, 99.9 %',
        },
      ]}
    />
  ),
  assumes: ['As of a free station.'],
  limits: [
    'Three directions determine a station and prove nothing; a fourth does.',
    'Without zenith angles there is no height; without directions no orientation, and no point can be shot from there.',
  ],
  units: 'As of a free station.',
  sources: [
    'Fischler and Bolles, Random sample consensus (1981): minimal sets that vote, here all of them.',
    'Ghilani and Wolf, Elementary Surveying (three-point resection and its circle); published examples are reproduced in the hub’s tests.',
  ],
};
