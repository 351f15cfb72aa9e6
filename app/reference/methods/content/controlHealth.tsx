import { Formula, M } from '@/app/reference/methods/Formula';
import { figure, percent } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Part, Points } from '@/app/reference/methods/parts';
import { FALSE_ALARM, NAMED_AT, SIGHTINGS_WANTED } from '@/lib/compute/survey/controlHealth';

export const controlHealth: Method = {
  slug: 'control-health',
  title: 'Does a control point stand?',
  lead: 'Many setups, many crews: which mark has moved while the others have not, when, and by how much?',
  group: 'Levels and control',
  body: (
    <>
      <Part title="All setups in one adjustment">
        <p>
          Each setup keeps its own unknowns, its marks as it saw them among them. All setups share the error
          of each mark’s published coordinates, held once by its published standard deviation. A row ties
          both:
        </p>
        <Formula>{String.raw`x_{s,m} - x_m = 0 \pm \sigma_\mathrm{reflector}`}</Formula>
        <p>
          What one setup’s station is off by is common to its marks and stays in that setup. Level runs that
          close add height differences between the same marks.
        </p>
      </Part>
      <Part title="Alternatives">
        <p>Against nothing having moved stand, of each mark:</p>
        <Points>
          {[
            'that it has moved before the first, the second, … of its sightings and stood elsewhere ever since;',
            'that it was misread in one sighting: a target height, a name.',
          ]}
        </Points>
        <p>
          A displacement <M>{String.raw`\nabla`}</M> in some sightings is estimated from the residuals{' '}
          <M>{'v'}</M> without solving again, with <M>{'C'}</M> for the rows that it enters:
        </p>
        <Formula>{String.raw`\begin{aligned} N &= C^\mathsf{T} P Q_v P C \\ \nabla &= N^{-1} C^\mathsf{T} P v \\ T &= \nabla^\mathsf{T} N \nabla \end{aligned}`}</Formula>
        <p>
          The most telling alternative is taken into the model and the rest tested again, until nothing stands
          out.
        </p>
      </Part>
      <Part title="When a mark is named">
        <Points>
          {[
            `Under ${percent(FALSE_ALARM)} of looks at control that stands finds anything: the level is shared among all marks and all times.`,
            `${SIGHTINGS_WANTED} sightings at least agree with its having moved: two setups, or one and a level run. One alone cannot tell a mark that moved from a misread height.`,
            `Every other cause is ${figure(Math.exp(NAMED_AT / 2))} times less likely.`,
          ]}
        </Points>
        <p>
          Where one sighting alone is beyond its limit, or all together are, or two marks explain it alike,
          the mark is in doubt: it is to be shot from a second setup. A later sighting that could have seen it
          as far off and finds it in its place answers the doubt: within 2σ, and 2σ no longer than what was
          seen. Where 2σ is longer than what a mark may miss by in the strictest class that saw it, its place
          is not known.
        </p>
        <p>
          A trusted mark that is named the hub suspects by itself. It never goes against a person: once
          somebody has said how far a mark is to be trusted, only a move that was sent in later counts.
        </p>
      </Part>
    </>
  ),
  assumes: [
    'Stated accuracies hold. Where more scatter is left than they allow, all covariances grow by σ₀².',
    'Setups that did not converge, or that a fault of their own explains best, are not heard; nor are setups over a mark.',
  ],
  limits: [
    'The newest 40 setups that saw the mark, in its present coordinates.',
    'Marks that move together by the same amount look like control that stands.',
    'It names a mark; it corrects none.',
  ],
  units:
    'Displacement is where it stands minus where it was published, in the project’s length unit; words give 95 %.',
  sources: [
    'Baarda (1968), A testing procedure for use in geodetic networks.',
    'Teunissen, Testing Theory (detection, identification, adaptation).',
    'Tested by simulation: 20 mm among five to eight marks, each setup seeing four, over three seeds.',
  ],
};
