import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import { CRITICAL_W } from '@/lib/compute/statistics/distributions';
import { MARKS_WANTED } from '@/lib/compute/survey/verdict';

export const setupVerdict: Method = {
  slug: 'setup-verdict',
  title: 'Verdict of a setup',
  lead: 'Whether a setup may be worked from: fail on what is wrong, hold on what is not proven, pass otherwise; in plan and in height apart, every verdict with its reasons and the next action.',
  group: 'Setups',
  body: (
    <>
      <Part title="Fail: wrong">
        <Points>
          {[
            'The adjustment did not converge.',
            <>
              A reading’s |w| is over {CRITICAL_W}. Directions and distances fail the plan, zenith angles the
              height.
            </>,
            'A target’s residual is over what the tolerance class allows: polar position from the fitted station minus published coordinates.',
            'A check differs by more than that.',
          ]}
        </Points>
        <p>
          A wrong mark pulls the good ones off too, so the one whose readings fit worst stands first. Where
          one fault explains it all, what to do is said once.
        </p>
      </Part>
      <Part title="Hold: not proven">
        <Points>
          {[
            <>
              Fewer than {MARKS_WANTED.horizontal} distinct trusted marks in plan, or {MARKS_WANTED.vertical}{' '}
              with an elevation in height. Repeats and second faces do not count; suspect marks take part and
              prove nothing.
            </>,
            'Without some mark the others would not determine the station, or it would move by more than the class’ residual.',
            'Another station would fit the same shots, or the station lies near the circle through its marks, from which directions alone do not find it.',
            'Over a mark: nothing confirms the orientation, or that the instrument stands over its own mark.',
            'The χ² test fails: the shots scatter more than the stated accuracies allow.',
            'At the class’ working radius a point is not good enough for the work, at 95 %.',
            'The class requires an independent check and none agrees, or the one that was shot disagrees or could not tell.',
          ]}
        </Points>
        <p>
          A setup that lacks nothing but its check is held with the single reason{' '}
          <code className="font-code text-[13px]">check_wanted</code>.
        </p>
      </Part>
      <Part title="Pass">
        <p>
          All else. The reasons still say what was not checked: no mark outside the fit, collimation with one
          face only.
        </p>
      </Part>
      <Part title="What stays apart">
        <p>
          An axis that fails is not also held: that it is not proven either would only hide what is wrong. The
          verdict of the setup is the worse of its two axes.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Least number of distinct trusted marks"
      rows={[
        { what: 'in plan', figure: MARKS_WANTED.horizontal },
        { what: 'in height', figure: MARKS_WANTED.vertical },
      ]}
    />
  ),
  assumes: [
    'The tolerance class says what the work needs. Those of a new project are common practice, not a rule: edit them and cite your clause.',
  ],
  limits: [
    'A verdict releases nothing. A person does, and a hold needs another person than its submitter.',
    'It supports the judgement of the people on site. Site rules, local codes and licensed practice come first.',
  ],
  units: 'Limits in the project’s length unit.',
  sources: [
    'Baarda, A Testing Procedure for Use in Geodetic Networks (1968).',
    'ISO 4463-1, Measurement methods for building: setting-out and measurement (independent checks, permitted deviations by class of work).',
  ],
};
