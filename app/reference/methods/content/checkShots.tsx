import { Formula, M } from '@/app/reference/methods/Formula';
import type { Method } from '@/app/reference/methods/method';
import { Part, Points } from '@/app/reference/methods/parts';

export const checkShots: Method = {
  slug: 'check-shots',
  title: 'Check and closing shots',
  lead: 'A mark shot again from a setup that stands: does it lie where it was published, within the tolerance and within what the uncertainty of setup, shot and mark explains?',
  group: 'Setups',
  body: (
    <>
      <Part title="Difference">
        <p>
          Polar position from the station minus published coordinates. Check shots never enter the fit. Its
          uncertainty is that of the station, the shot and the mark together:
        </p>
        <Formula>{String.raw`\begin{aligned} \Sigma = {}& J Q J^\mathsf{T} + K \Sigma_\ell K^\mathsf{T} + \Sigma_\mathrm{mark} \\ &- J C - C^\mathsf{T} J^\mathsf{T} \end{aligned}`}</Formula>
        <p>
          <M>{'J'}</M> and <M>{'K'}</M> are the derivatives of the position by station and readings.{' '}
          <M>{'C'}</M> is the covariance of the station with the mark’s coordinates, zero for a mark outside
          the fit. A mark of the fit is correlated with the station that it made; forgetting that would make
          drift look larger or smaller than it is.
        </p>
        <p>
          In plan <M>{'u'}</M> is that of the worst direction, so that rotating the site changes nothing.
        </p>
      </Part>
      <Part title="Outcome">
        <p>
          In plan and in height apart, with the class’ residual as the tolerance <M>{'T'}</M>:
        </p>
        <Points>
          {[
            <>
              <b>over</b>: <M>{'|d| > T'}</M>. The setup fails.
            </>,
            <>
              <b>not capable</b>: <M>{'2u > T'}</M>. The check could not have told.
            </>,
            <>
              <b>agreed</b>: <M>{String.raw`|d| \le 2u \le T`}</M>.
            </>,
            <>
              <b>disagrees</b>: within the tolerance, but more than the uncertainty explains.
            </>,
          ]}
        </Points>
      </Part>
      <Part title="Independence and drift">
        <p>
          A mark outside the fit, trusted, proves the setup. A mark that was in the fit shows whether the
          instrument has moved since: drift, not independence. Of each mark the check that was observed last
          counts.
        </p>
      </Part>
    </>
  ),
  assumes: ['Direction, zenith angle and distance to each reflector as it stood, in whatever faces.'],
  limits: [
    'Quarantined marks confirm nothing and contradict nothing.',
    'A check on a mark that moved together with the control of the fit agrees: use a mark of another source.',
  ],
  units: 'Answers give u, one standard deviation, in the project’s length unit.',
  sources: [
    'JCGM 100:2008, Guide to the expression of uncertainty in measurement (propagation with correlation).',
    'ISO 17123-5 (field test by coordinates).',
  ],
};
