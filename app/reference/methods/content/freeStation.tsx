import { Formula, M } from '@/app/reference/methods/Formula';
import { figure, metres } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import { CONVERGED, MAX_ITERATIONS } from '@/lib/compute/adjustment/solve';
import { UNDETERMINED_SIGMA } from '@/lib/compute/survey/stationModel';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';
import { METHOD, METHOD_VERSION } from '@/lib/services/setups/result';

export const freeStation: Method = {
  slug: 'free-station',
  title: 'Free station (resection)',
  lead: 'Directions, zenith angles and slope distances to known marks, all in one weighted least-squares adjustment in space, which gives the station, its orientation, and how far both can be trusted.',
  group: 'Setups',
  carried: { method: METHOD, version: METHOD_VERSION },
  body: (
    <>
      <Part title="Observations">
        <p>
          With the offsets <M>{String.raw`\Delta E, \Delta N, \Delta h`}</M> from the tilting axis to the
          reflector, the orientation <M>{'o'}</M>, the collimation <M>{'c'}</M>, the index <M>{'i'}</M> and
          the scale <M>{'s'}</M>; the upper sign on face left, and neither <M>{'c'}</M> nor <M>{'i'}</M> in a
          mean of both faces:
        </p>
        <Formula>{String.raw`\begin{aligned} r &= \operatorname{atan2}(\Delta E, \Delta N) - o \pm \frac{c}{\sin z} \\[2pt] z &= z(\Delta E, \Delta N, \Delta h, k) \pm i \\[4pt] S &= S(\Delta E, \Delta N, \Delta h)\,(1 + s) \end{aligned}`}</Formula>
        <p>
          <M>{'z(…)'}</M> and <M>{'S(…)'}</M> are those of the ray over a round earth, with refraction{' '}
          <M>{'k'}</M>.
        </p>
      </Part>
      <Part title="Unknowns">
        <Points>
          {[
            'The tilting axis: easting, northing, elevation; the orientation, which is the azimuth of the circle’s zero.',
            'The coefficient of refraction; collimation and index where some readings came in one face only; the scale of all distances where no atmosphere came. Each is held by a pseudo-observation with its own standard deviation.',
            'The coordinates of every mark, held at their published values by their published standard deviations. So the marks’ own errors are in the result, and ten shots to one mark do not make it better than it is.',
            'Centring and height of each reflector as it stood. With one erection on a mark they are added to the mark’s own variances; a second one gets unknowns of its own.',
          ]}
        </Points>
      </Part>
      <Part title="Solution">
        <p>
          The sum of squares <M>{String.raw`v^\mathsf{T} P v`}</M> is made least by Gauss-Newton steps on the
          normal equations, the marks eliminated block by block and the rest factored after Cholesky; a step
          that makes the sum grow is halved. It ends when the squared step, measured in its own standard
          deviations, is below {figure(CONVERGED)}, and fails honestly after {MAX_ITERATIONS} steps.
        </p>
        <Formula>{String.raw`\begin{aligned} \bigl(A^\mathsf{T} P A\bigr)\,\mathrm{d}x &= A^\mathsf{T} P \bigl(\ell - f(x)\bigr) \\ Q &= \bigl(A^\mathsf{T} P A\bigr)^{-1} \end{aligned}`}</Formula>
      </Part>
      <Part title="Start">
        <p>
          No guess is asked for. Where the marks have direction and distance, each is a point of a polar
          picture, and the rigid motion that lays the picture onto the marks’ coordinates is found in closed
          form, for any orientation:
        </p>
        <Formula>{String.raw`\begin{aligned} s &= \sum (q_E\,p_N - q_N\,p_E) \\ c &= \sum (q_E\,p_E + q_N\,p_N) \\ o &= \operatorname{atan2}(s, c) \end{aligned}`}</Formula>
        <p>
          <M>{'p'}</M> are the picture’s points and <M>{'q'}</M> the marks, both from their centres. Where the
          marks do not agree with it, or lack a reading, the start is found by consensus of the smallest sets
          that give one.
        </p>
      </Part>
      <Part title="What is answered">
        <p>
          The elevation of the ground mark is the axis minus the instrument height, and null where no mark is
          occupied. A target’s residual is its polar position from the fitted station minus its published
          coordinates; an observation’s is reduced observed minus fitted.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Pseudo-observations"
      rows={[
        {
          what: 'refraction k',
          figure: `${figure(DEFAULT_SURROUNDINGS.refraction)} ± ${figure(DEFAULT_SURROUNDINGS.refractionSigma)}`,
        },
        {
          what: 'scale where the air is unknown',
          figure: `0 ± ${DEFAULT_SURROUNDINGS.unknownAtmospherePpm} ppm`,
        },
        {
          what: 'a height that nothing determines',
          figure: `± ${metres(UNDETERMINED_SIGMA)}`,
          note: 'takes no part; the answer is null',
        },
      ]}
    />
  ),
  assumes: [
    'Readings are independent but for what is modelled as common to them.',
    'The instrument stood still, levelled, with its compensator on; a shot without it is noted.',
    'Every shot names the mark that it hit.',
  ],
  limits: [
    'Two marks determine a station and prove nothing: residuals of zero are not agreement. The verdict asks for three.',
    'Distances without a zenith angle are used only where both heights are known, and left out otherwise.',
    'Sights with a direction or a distance alone take part; how they begin is a method of its own.',
    'Outside the figure of its marks a station extrapolates: the setup says so, and its ellipse shows it.',
    'Quarantined marks take no part.',
  ],
  units:
    'Positions in the project’s length unit; the azimuths of orientation and ellipse in degrees, the standard deviation of the orientation in seconds of arc.',
  sources: [
    'Mikhail and Gracie, Analysis and Adjustment of Survey Measurements; Björck, Numerical Methods for Least Squares Problems, §9.2 (Gauss-Newton).',
    'Brown, A solution to the general problem of multiple station analytical stereotriangulation (1958): elimination by blocks.',
    'Umeyama, Least-squares estimation of transformation parameters (1991): start values.',
    'Tested against an independent solver, published networks and simulated days.',
  ],
};
