import { Formula, M } from '@/app/reference/methods/Formula';
import { figure, metres } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import {
  ASSUMED_SIGHT,
  DEFAULT_LEVEL_SIGMA,
  LONG_SIGHT,
  mmPerRootKm,
} from '@/lib/compute/survey/levelling/accuracy';
import { THIRD_ORDER } from '@/lib/compute/survey/levelling/limit';
import { LEVEL_METHOD, LEVEL_METHOD_VERSION } from '@/lib/services/levelRuns/result';

export const levelRun: Method = {
  slug: 'level-run',
  title: 'Level run',
  lead: 'A level book reduced as the field book does it, freed of collimation, curvature and refraction by the lengths of its sights, closed against its limit, and distributed where it closes.',
  group: 'Levels and control',
  carried: { method: LEVEL_METHOD, version: LEVEL_METHOD_VERSION },
  body: (
    <>
      <Part title="The book">
        <p>
          Heights of collimation from the start’s published elevation, rises and falls beside them, and the
          sums at the foot of the page, which must agree:
        </p>
        <Formula>{String.raw`\sum \mathrm{BS} - \sum \mathrm{FS} = \sum \text{rises} - \sum \text{falls} = \text{last} - \text{first}`}</Formula>
      </Part>
      <Part title="Sights of unequal length">
        <p>
          A line of sight that rises by <M>{'c'}</M> a metre, and curvature and refraction, cancel between a
          backsight and a foresight of the same length. Of what is left, with lengths <M>{'b'}</M> and{' '}
          <M>{'f'}</M>, is taken off:
        </p>
        <Formula>{String.raw`c\sum (b - f) + \frac{1 - k}{2R}\sum (b^2 - f^2)`}</Formula>
        <p>
          <M>{'c'}</M> comes from the level’s last two-peg test. Where no length was measured nothing is taken
          off, and every sight counts {metres(ASSUMED_SIGHT)}.
        </p>
      </Part>
      <Part title="Closing">
        <p>
          The misclosure is levelled minus published. Its limit goes with the root of the length of the
          sights, or of the number of standings:
        </p>
        <Formula>{String.raw`|w| \le a\sqrt{L} \quad\text{or}\quad |w| \le a\sqrt{n}`}</Formula>
        <p>
          Within it the misclosure is distributed along the way of the sights. Since the variance of a reading
          grows with its length, that is the least-squares solution of a single run; at the way <M>{'p'}</M>{' '}
          of <M>{'L'}</M>
          there remains
        </p>
        <Formula>{String.raw`\sigma_H^2 = \sigma^2\,\frac{p\,(L - p)}{L}`}</Formula>
        <p>and the collimation’s own error, one for all sights. Beyond the limit nothing is distributed.</p>
      </Part>
      <Part title="Verdict">
        <Points>
          {[
            <>
              <b>fail</b>: it does not close within its limit, and the stated accuracy of the two marks does
              not explain the excess. Known marks on the way bound where the error came in; a whole figure of
              the staff is named.
            </>,
            <>
              <b>hold</b>: something is not proven, such as a run left open, a mark that is not trusted,
              sights whose balance matters and is not known, a level that failed its test.
            </>,
            <>
              <b>pass</b> otherwise. A loop proves the levelling and no mark but its own; a point read between
              hangs on one reading.
            </>,
          ]}
        </Points>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Unless level and project say otherwise (common practice)"
      rows={[
        {
          what: 'limit of the misclosure',
          figure: `${figure(mmPerRootKm(THIRD_ORDER.factor))} mm √km`,
          note: 'third order, the same as 0.05 ft √mile',
        },
        {
          what: 'a kilometre of double-run levelling',
          figure: `${figure(mmPerRootKm(DEFAULT_LEVEL_SIGMA))} mm`,
          note: 'one run counts √2 of it',
        },
        { what: 'a sight whose length nobody measured', figure: metres(ASSUMED_SIGHT) },
        { what: 'a long sight, from', figure: metres(LONG_SIGHT) },
      ]}
    />
  ),
  assumes: [
    'Turning points stand firm between foresight and backsight. The staff is plumb.',
    'One collimation holds through the run.',
  ],
  limits: [
    'A level that compensates badly, a staff with a worn foot or graduation: they close and are wrong. Test the level, level with two staffs alternately.',
    'A run is judged by itself; runs that meet belong into one network.',
  ],
  units: 'The project’s length unit; accuracies in mm for a kilometre of double run.',
  sources: [
    'Ghilani, Adjustment Computations, ch. 12 (weights and distribution).',
    'FGCC, Standards and Specifications for Geodetic Control Networks, 1984 (third order; from memory).',
    'ISO 17123-2 (what a stated accuracy means).',
  ],
};
