import { Formula, M } from '@/app/reference/methods/Formula';
import { figure } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import { CRITICAL_W } from '@/lib/compute/statistics/distributions';
import { METHOD, METHOD_VERSION } from '@/lib/services/adjustments/result';

export const network: Method = {
  slug: 'network',
  title: 'Network adjustment',
  lead: 'Setups, levelled differences and rover positions of a whole site in one least-squares solution: every control point with its covariance, and every observation with its test.',
  group: 'Levels and control',
  carried: { method: METHOD, version: METHOD_VERSION },
  body: (
    <>
      <Part title="Observations">
        <Points>
          {[
            'Directions, zenith angles and slope distances of setups, over points or free, as in a single setup: what several readings have in common is one unknown with a pseudo-observation of its own. Centring errors turn with the setup, so that turning the whole network changes no reading.',
            'Levelled differences of heights, by length or by number of standings.',
            'Rover positions and differences of positions with their full covariance. Correlated coordinates become rows of unit weight.',
          ]}
        </Points>
        <Formula>{String.raw`C = L L^\mathsf{T} \quad\Rightarrow\quad L^{-1}(\ell - x) \sim N(0, I)`}</Formula>
      </Part>
      <Part title="Datum">
        <p>
          Each coordinate is held, weighted by its published standard deviation, free, or new. Movements of
          the whole network that no observation sees, shifts and the turn about the vertical, are settled by
          the free coordinates: their corrections get the least sum of squares.
        </p>
        <Formula>{String.raw`\begin{aligned} B^\mathsf{T}(x - x^0) &= 0, \qquad Q = S\,Q^0 S^\mathsf{T} \\ S &= I - G\,(B^\mathsf{T} G)^{-1} B^\mathsf{T} \end{aligned}`}</Formula>
        <p>
          <M>{'G'}</M> are the movements, <M>{'B'}</M> the same on the free coordinates alone. So a free
          network shows its own accuracy, not that of two points that somebody chose.
        </p>
      </Part>
      <Part title="Solution">
        <p>
          The one engine of the hub, on sparse normal equations: an order of elimination that keeps them
          sparse, fronts of dense blocks, and of the inverse only those elements that are asked for. The steps
          and their end are those of a free station.
        </p>
      </Part>
      <Part title="Snooping">
        <p>
          Where it is asked for, the observation with the largest |w| beyond {CRITICAL_W} is taken out, all
          tests are brought up to date, and so on until none is beyond. All three coordinates of a position
          leave together. Observations whose error would have shown in the same way are named beside it. Where
          a tenth of the observations is out, it is the model or the stated accuracies that are wrong, and
          snooping says so.
        </p>
      </Part>
      <Part title="Two epochs">
        <p>
          The same site observed again: both epochs are adjusted free, control believed no more than any other
          point, and their common points tested for congruence. While the test fails, the point that brings in
          most leaves the datum; displacements <M>{'d'}</M> are those in the datum of the points that stayed.
        </p>
        <Formula>{String.raw`d^\mathsf{T} Q^{+} d \le \chi^2_{0.95}(h) \quad\text{or}\quad h\,F_{0.95}(h, \nu)`}</Formula>
      </Part>
    </>
  ),
  figures: <Figures caption="Snooping" rows={[{ what: 'critical |w|', figure: figure(CRITICAL_W) }]} />,
  assumes: [
    'One frame for all: positions of rovers come in the frame of the project.',
    'A normal distribution, and few mistakes.',
  ],
  limits: [
    'What nothing connects to the datum is answered with null, and why.',
    'Removing an observation is a decision of the site: what was removed stays visible with the estimate of its error.',
  ],
  units: 'Metres and radians inside; answers in the project’s units.',
  sources: [
    'Baarda (1968); Kok, On data snooping and multiple outlier testing (1984).',
    'Pelzer (1971); Caspary, Concepts of Network and Deformation Analysis, §6 (congruence).',
    'Meissl (1969); Baarda, S-transformations and criterion matrices (1973): inner constraints.',
    'Amestoy, Davis and Duff (1996); Liu, The multifrontal method for sparse matrix solution (1992); Davis, Direct Methods for Sparse Linear Systems.',
    'Printed networks of textbooks are reproduced in the hub’s tests.',
  ],
};
