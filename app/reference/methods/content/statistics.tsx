import { Formula, M } from '@/app/reference/methods/Formula';
import { figure } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import { CRITICAL_W, DELTA_0, ELLIPSE_95, NORMAL_95 } from '@/lib/compute/statistics/distributions';

export const statistics: Method = {
  slug: 'statistics',
  title: 'Statistics of an adjustment',
  lead: 'What the residuals say of the whole, what each of them says of its own reading, how large a mistake could hide, and the ellipse in which the station lies.',
  group: 'Setups',
  body: (
    <>
      <Part title="The whole: σ₀ and χ²">
        <Formula>{String.raw`\sigma_0 = \sqrt{\frac{v^\mathsf{T} P v}{\nu}} \qquad v^\mathsf{T} P v \le \chi^2_{0.95}(\nu)`}</Formula>
        <p>
          <M>{String.raw`\nu`}</M> is the number of observations, pseudo-observations included, minus that of
          unknowns. The test is of the upper tail at 95 %: residuals larger than the stated accuracies allow.
          A sum under the 5 % point is a note, not a fault. Where the test fails, all standard deviations are
          multiplied by <M>{String.raw`\sigma_0`}</M>; they are never reduced.
        </p>
      </Part>
      <Part title="One reading: redundancy and w">
        <Formula>{String.raw`r_i = 1 - p_i\,a_i^\mathsf{T} Q\,a_i \qquad w_i = \frac{v_i}{\sigma_i\sqrt{r_i}}`}</Formula>
        <p>
          The redundancy number says what share of an error shows in the reading’s own residual. Without
          mistakes <M>{'w_i'}</M> is standard normal; beyond {CRITICAL_W} in either direction, one in a
          thousand, the reading is an outlier and the setup fails. Where nothing else controls a reading, its{' '}
          <M>{'w'}</M> is null.
        </p>
      </Part>
      <Part title="What could hide">
        <p>
          The smallest error that is found with a power of 0.80 at that level, and what it would do to the
          unknowns if it just stayed hidden:
        </p>
        <Formula>{String.raw`\nabla_i = \frac{\delta_0\,\sigma_i}{\sqrt{r_i}} \qquad \nabla x = Q\,a_i\,p_i\,\nabla_i`}</Formula>
      </Part>
      <Part title="The ellipse">
        <p>The standard ellipse from the station’s covariance:</p>
        <Formula>{String.raw`\begin{aligned} a^2, b^2 &= \frac{\sigma_E^2 + \sigma_N^2}{2} \pm \sqrt{\Bigl(\frac{\sigma_N^2 - \sigma_E^2}{2}\Bigr)^2 + \sigma_{EN}^2} \\[4pt] \tan 2\alpha &= \frac{2\,\sigma_{EN}}{\sigma_N^2 - \sigma_E^2} \end{aligned}`}</Formula>
        <p>
          <M>{String.raw`\alpha`}</M> is the azimuth of the major axis, from grid north, 0 to 180°. The 95 %
          ellipse is {figure(ELLIPSE_95, 4)} times as large, <M>{String.raw`\sqrt{5.991}`}</M>; where standard
          deviations were scaled by an estimated <M>{String.raw`\sigma_0`}</M>,{' '}
          <M>{String.raw`\sqrt{2F_{0.95}(2,\nu)}`}</M>.
        </p>
      </Part>
      <Part title="Accuracy at work">
        <p>
          A point at the working radius <M>{String.raw`\rho`}</M> inherits the station, and the orientation as
          a lever. In plan the worst direction of the worst ray counts; in height axis, zenith angle and
          refraction:
        </p>
        <Formula>{String.raw`\begin{aligned} u_h^2 &= \max_\alpha\,\lambda_{\max}\bigl(J_\alpha Q J_\alpha^\mathsf{T}\bigr) \\[2pt] u_v^2 &= q_{HH} + \rho^2\sigma_z^2 + b^2 q_{kk} + 2b\,q_{Hk} \\ b &= -\frac{\rho^2}{2R} \end{aligned}`}</Formula>
        <p>{figure(NORMAL_95, 3)} times these is set against what the work allows.</p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Factors"
      rows={[
        { what: 'critical |w|, two-sided, α₀ = 0.001', figure: figure(CRITICAL_W) },
        { what: 'non-centrality δ₀, power 0.80', figure: figure(DELTA_0) },
        { what: '95 % of one dimension', figure: figure(NORMAL_95, 6) },
        { what: '95 % of two dimensions', figure: figure(ELLIPSE_95, 5) },
      ]}
    />
  ),
  assumes: [
    'Normal errors with the stated standard deviations. The weights are a priori: the test is of them as much as of the readings.',
  ],
  limits: [
    'Redundancy numbers count readings, not marks: a repeat raises them and proves nothing about its mark. The verdict counts distinct marks.',
    'A test of one reading at a time is meant for one mistake. Two that agree with each other are for the explanations and for an independent check.',
  ],
  units: 'w has none; a minimal detectable bias has the reading’s: seconds of arc, or the length unit.',
  sources: [
    'Baarda, A Testing Procedure for Use in Geodetic Networks (1968): w, redundancy, δ₀, external reliability.',
    'Mikhail and Gracie, Analysis and Adjustment of Survey Measurements, §9.3 (ellipse).',
    'NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.5.8 (χ² test of a variance).',
    'Abramowitz and Stegun, Handbook of Mathematical Functions, 26.6.4 (F with two degrees of freedom).',
  ],
};
