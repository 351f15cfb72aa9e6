import { Formula, M } from '@/app/reference/methods/Formula';
import { arcseconds, figure, percent } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import { LARGEST_INFLATION, WIDTHS } from '@/lib/compute/statistics/evidence';
import { ODDS, WORTH_NAMING } from '@/lib/compute/survey/explain';
import { USUAL } from '@/lib/compute/survey/suspicions';

const NAMES: Readonly<Record<string, string>> = {
  none: 'nothing but chance',
  targetMoved: 'a mark that was moved',
  heightOfTargetOrMark: 'a target height, or a mark that settled',
  distanceConstant: 'a prism constant',
  targetsSwapped: 'two targets swapped',
  distanceScale: 'a scale of all distances',
  wrongFoot: 'a mark in the other foot',
  singleFace: 'one face',
  instrumentMoved: 'an instrument that moved after the first shots',
  stationMoved: 'an instrument that stands beside its mark',
  instrumentHeight: 'an instrument height misread',
  unexplained: 'none of these',
};

export const explanations: Method = {
  slug: 'explanations',
  title: 'What would explain it',
  lead: 'Where a setup does not fit, single faults are tried in the same adjustment and weighed against each other: which fault, of which size, with what share of the belief, and the one shot that would settle it.',
  group: 'Setups',
  body: (
    <>
      <Part title="Faults">
        <p>Each is one alternative to the adjustment that did not fit:</p>
        <Points>
          {[
            'As further unknowns: a constant or a scale of all distances; collimation or index of single faces; a mark that stands elsewhere; a height of target or mark; over a mark, an instrument beside it or its height. The adjustment estimates their size beside the station.',
            'As the same shots to other marks: two targets with each other’s name, or a mark whose coordinates came in the other foot.',
            'Where a setup’s own shots agree and its last check does not: shift, rise and turn of the instrument, common to all later shots, against each mark that moved alone.',
            'None: chance alone. And unexplained: all standard deviations are larger than stated, by any factor.',
          ]}
        </Points>
        <Formula>{String.raw`\ell = f(x) + C\,{\nabla} + e`}</Formula>
      </Part>
      <Part title="Weights">
        <p>
          A model with a free fault always fits better. What the freedom is worth is paid for by how wide the
          fault might have been beforehand. With the estimate <M>{String.raw`\hat\nabla`}</M>, its covariance{' '}
          <M>{'Q'}</M> and the prior covariance <M>{'W'}</M>:
        </p>
        <Formula>{String.raw`\begin{aligned}\ln E = &-\frac12 v^\mathsf{T} P v + \frac12 \ln\frac{|Q|}{|Q + W|} \\ &- \frac12\,\hat\nabla^\mathsf{T}(Q + W)^{-1}\hat\nabla\end{aligned}`}</Formula>
        <p>
          averaged over widths of {WIDTHS.map((width) => figure(width)).join(', ')} times the usual size,
          since faults of the field have heavy tails. For the model that explains nothing the standard
          deviations are stretched by any factor up to {figure(LARGEST_INFLATION)}. Evidence times odds,
          scaled to a sum of 1, are the weights. A kind shares its odds among all that it might concern.
        </p>
      </Part>
      <Part title="What is told">
        <p>
          The heaviest first. What weighs less than {percent(WORTH_NAMING)} is not named and goes to
          “unexplained”. Only a setup that does not fit is explained; one that fits needs nothing explained.
        </p>
      </Part>
    </>
  ),
  figures: (
    <div className="grid items-start gap-8 md:grid-cols-2">
      <Figures
        caption="Odds before anything is read"
        rows={Object.entries(ODDS).map(([fault, odds]) => ({
          what: NAMES[fault] ?? fault,
          figure: figure(odds),
        }))}
      />
      <Figures
        caption="Usual sizes, one standard deviation"
        rows={[
          { what: 'prism constant', figure: `${figure(USUAL.constant * 1000)} mm` },
          { what: 'scale', figure: `${figure(USUAL.scale * 1e6)} ppm` },
          { what: 'a moved mark, each way', figure: `${figure(USUAL.moved)} m` },
          { what: 'and up or down', figure: `${figure(USUAL.lifted)} m` },
          { what: 'height of a target', figure: `${figure(USUAL.height)} m` },
          { what: 'one face', figure: arcseconds(USUAL.face) },
          { what: 'a kicked instrument, each way', figure: `${figure(USUAL.shift)} m` },
          { what: 'its sinking', figure: `${figure(USUAL.sinking)} m` },
          { what: 'its turn', figure: arcseconds(USUAL.turn) },
        ]}
      />
    </div>
  ),
  assumes: [
    'One fault at a time. Odds and usual sizes are common practice at best; the readings outweigh them soon.',
  ],
  limits: [
    'The height of a target and a mark that settled look the same from one setup: they are one explanation.',
    'With too few marks several faults explain the same residuals; the weights say so by sharing.',
    'Nothing is corrected by an explanation. It names the shot that would settle it.',
  ],
  units: 'Sizes in the unit that people think of them in: mm, ppm, seconds of arc, the length unit.',
  sources: [
    'Baarda (1968); Teunissen, Testing Theory, ch. 4 (alternative hypotheses as further unknowns).',
    'MacKay, Information Theory, Inference, and Learning Algorithms, ch. 28 (evidence and the Occam factor).',
    'Tested by making the mistakes in simulated setups and counting what is named.',
  ],
};
