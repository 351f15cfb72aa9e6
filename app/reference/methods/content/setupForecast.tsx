import { Formula, M } from '@/app/reference/methods/Formula';
import { metres } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import { FORECAST_DEFAULTS } from '@/lib/compute/survey/forecast';
import { FORECAST_METHOD, FORECAST_METHOD_VERSION } from '@/lib/services/setupForecasts/result';

export const setupForecast: Method = {
  slug: 'setup-forecast',
  title: 'Setup forecast',
  lead: 'What a free station would be good for at a place where nobody stands yet, and what the tolerance class would say of its geometry: for candidate places, or as a map of the site.',
  group: 'Setups',
  carried: { method: FORECAST_METHOD, version: FORECAST_METHOD_VERSION },
  body: (
    <>
      <Part title="Errorless shots">
        <p>
          Covariances of least squares follow from geometry and weights alone. So the forecast takes the shots
          that an instrument without error would read at the place, gives them the weights of real ones, and
          runs the same adjustment of a free station. There is no second formula: a setup that is shot there
          later has the same standard deviations, but for what its own errors move.
        </p>
        <Formula>{String.raw`Q = \bigl(A^\mathsf{T} P A\bigr)^{-1} \quad\text{at}\quad \ell = f(x)`}</Formula>
      </Part>
      <Part title="The weakest mark">
        <p>
          Nobody has shot anything yet, so the shift without a mark is not a figure but a spread. What all
          marks give is the best estimate, and what another estimate differs from it by is uncorrelated with
          it:
        </p>
        <Formula>{String.raw`\operatorname{cov}\bigl(\hat x_{(m)} - \hat x\bigr) = Q_{(m)} - Q`}</Formula>
        <p>
          Its 95 % bound, in plan the major half-axis of the ellipse, stands where the verdict of a setup has
          the shift.
        </p>
      </Part>
      <Part title="Residuals without a mistake">
        <p>
          What a mark’s residual may show though nothing is wrong. With the station’s derivatives <M>{'J'}</M>{' '}
          and each row <M>{'k'}</M> that enters the polar position or the published coordinates by{' '}
          <M>{'c_k'}</M>:
        </p>
        <Formula>{String.raw`\begin{aligned} \Sigma = {}& J Q J^\mathsf{T} + \sum_k \sigma_k^2\,c_k c_k^\mathsf{T} \\ &+ \sum_k \bigl(J Q a_k c_k^\mathsf{T} + c_k a_k^\mathsf{T} Q J^\mathsf{T}\bigr) \end{aligned}`}</Formula>
        <p>
          Where that is more than the class allows, a note says that good setups would often be called wrong:
          the class asks more than these marks and this instrument can show.
        </p>
      </Part>
      <Part title="Blunders">
        <p>
          The smallest error that would be found in a reading of each kind, where the largest one hides, and
          how far the station may be off by an error in one reading that just stays hidden.
        </p>
      </Part>
      <Part title="Verdict and rank">
        <p>
          The verdict of a setup, given the forecast fit: pass, or hold with the reason. Never fail, for
          nobody has made a mistake yet. Whether the class also asks for a check stands in the notes. Places
          that pass come first; among them the one that uses up least of what the work allows at its radius.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Where nothing is stated (common practice)"
      rows={[
        { what: 'shortest sight', figure: metres(FORECAST_DEFAULTS.shortestSight) },
        { what: 'longest sight', figure: metres(FORECAST_DEFAULTS.longestSight) },
        { what: 'height of the instrument above ground', figure: metres(FORECAST_DEFAULTS.instrumentHeight) },
        { what: 'ground', figure: 'mean of the targets’ elevations' },
      ]}
    />
  ),
  assumes: ['Stated accuracies are true, marks are undisturbed, and every target in range is shot alike.'],
  limits: [
    'It does not know what stands between a place and a mark: walk the sight lines.',
    'A map has one elevation of ground for all its cells; heights matter little to a forecast, except over short steep sights.',
    'It says nothing of the setup that will be shot: that has a verdict of its own.',
  ],
  units: 'Those of the request. Maps are row by row from the south-west cell, origin and spacing stated.',
  sources: [
    'Grafarend and Sansò, Optimization and Design of Geodetic Networks (design of the first order).',
    'Rao, Linear Statistical Inference and Its Applications, §5a.2 (from memory): an estimate’s difference from the best one.',
    'Baarda (1968): minimal detectable biases and their effect.',
    'Tested against simulated setups shot from the place: equal covariances, and 95 of 100 shifts and residuals within their bounds.',
  ],
};
