import { Formula, M } from '@/app/reference/methods/Formula';
import { figure, percent } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import { CLEAR, MOST } from '@/lib/compute/grade/lotOffset';

export const lots: Method = {
  slug: 'lots',
  title: 'A layer as a whole',
  lead: 'Bias, spread and share within tolerance of the checks on a layer, and its acceptance by the rule that the contract names.',
  group: 'Ground and blades',
  body: (
    <>
      <Part title="Bias and spread">
        <Formula>{String.raw`\begin{aligned} \bar d &= \frac1n\sum d_i & \mathrm{rmse} &= \sqrt{\frac1n\sum d_i^2} \\ s &= \sqrt{\frac{\sum (d_i - \bar d)^2}{n-1}} \end{aligned}`}</Formula>
        <p>
          Bias and spread apart: a lot that is high as a whole needs trimming, one that scatters needs another
          pass.
        </p>
      </Part>
      <Part title="Percent within limits">
        <p>
          By the standard-deviation method, from the quality index of each limit and <M>{'B'}</M>, the
          distribution function of Beta(<M>{'n/2-1'}</M>, <M>{'n/2-1'}</M>):
        </p>
        <Formula>{String.raw`\begin{aligned} Q_a &= \frac{a - \bar d}{s}, \qquad Q_b = \frac{\bar d + b}{s} \\[2pt] P(Q) &= 100\Bigl(1 - B\Bigl(\frac12 - \frac{Q\sqrt n}{2(n-1)}\Bigr)\Bigr) \\[2pt] \mathrm{PWL} &= P(Q_a) + P(Q_b) - 100 \end{aligned}`}</Formula>
        <p>It takes three readings at least.</p>
      </Part>
      <Part title="Rules">
        <Points>
          {[
            <>
              <b>every point</b>: each reading within the tolerance, the limits included.
            </>,
            <>
              <b>window</b>: of every so many readings in a row, at least so many within.
            </>,
            <>
              <b>percent within limits</b>: at least the contract’s.
            </>,
            'No rule: the lot by its points.',
          ]}
        </Points>
        <p>Rules count plain readings, as their clauses do; holds are reported beside.</p>
      </Part>
      <Part title="The wrong level">
        <p>
          A lot that lies off by its layer’s own offset is told so before anybody trims: its mean and at least{' '}
          {percent(MOST)} of its readings lie within the tolerance of the layer plus or minus the offset, and
          the offset is more than {figure(CLEAR)} times the tolerance’s wider side.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="A shift by the offset"
      rows={[
        { what: 'share of the readings that must lie there', figure: percent(MOST) },
        { what: 'offset over the tolerance’s wider side, more than', figure: figure(CLEAR) },
      ]}
    />
  ),
  assumes: [
    'Checks on the present version of the layer, from setups that stand; those that do not are counted apart.',
  ],
  limits: [
    '“Four of five” is a weak rule: a surface with only 80 % in tolerance passes one such window three times in four.',
    'Percent within limits takes readings for independent draws from one normal spread. Points picked by eye are neither.',
    'Volumes are not computed yet: they are null.',
  ],
  units: 'The project’s length unit; percent.',
  sources: [
    'FHWA Technical Advisory T 5080.12 and AASHTO R 9 (percent within limits, standard-deviation method).',
    'Published tables of the quality index are reproduced in the hub’s tests.',
  ],
};
