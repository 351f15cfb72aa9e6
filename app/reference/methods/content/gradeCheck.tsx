import { Formula, M } from '@/app/reference/methods/Formula';
import { figure } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import { ENOUGH } from '@/lib/compute/grade/conformance';

export const gradeCheck: Method = {
  slug: 'grade-check',
  title: 'Grade check',
  lead: 'How far ground lies above or below its layer, how well that is known, and with what probability it lies within the tolerance.',
  group: 'Ground and blades',
  body: (
    <>
      <Part title="Deviation">
        <p>
          Vertical, ground minus layer: plus is high and a cut. The layer is its surface with a signed offset{' '}
          <M>{'o'}</M>. Beside it stands the deviation square to the surface, whose gradient is <M>{'g'}</M>.
        </p>
        <Formula>{String.raw`d = H - \bigl(H_\mathrm{design}(E, N) + o\bigr) \qquad d_n = \frac{d}{\sqrt{1 + g_E^2 + g_N^2}}`}</Formula>
      </Part>
      <Part title="Uncertainty">
        <p>
          On a slope an error in plan is an error in height. The covariance of the point comes from the setup,
          the shot and the rod, or from a stated σ:
        </p>
        <Formula>{String.raw`u^2 = n^\mathsf{T}\,\Sigma\,n, \qquad n = (-g_E,\ -g_N,\ 1)`}</Formula>
        <p>
          A shot to the ground is read in one face: its angles count <M>{String.raw`\sqrt2`}</M> of the stated
          accuracy, and collimation and index remain in them.
        </p>
      </Part>
      <Part title="Probability">
        <p>
          With the tolerance from <M>{'-b'}</M> to <M>{'a'}</M> and a normal distribution about the reading:
        </p>
        <Formula>{String.raw`p = \Phi\Bigl(\frac{a - d}{u}\Bigr) - \Phi\Bigl(\frac{-b - d}{u}\Bigr)`}</Formula>
        <Points>
          {[
            <>
              <b>pass</b> where p is at least {figure(ENOUGH)}; <b>fail</b> where it is at most{' '}
              {figure(1 - ENOUGH)}.
            </>,
            <>
              <b>hold</b> between: too close to call.
            </>,
            'Where even a reading in the middle of the tolerance could not reach that, the method is not capable, and the reason says so.',
            'Without any σ the reading is judged as read.',
          ]}
        </Points>
      </Part>
      <Part title="In force">
        <p>
          A check counts where its setup was released, unexpired and not withdrawn at the time of observation;
          otherwise it is kept on hold. It is independent where another setup than the machine’s was used.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Conformance probability"
      rows={[
        { what: 'pass from', figure: figure(ENOUGH) },
        { what: 'fail up to', figure: figure(1 - ENOUGH) },
      ]}
    />
  ),
  assumes: ['Normal errors; the rod on firm ground, plumb.'],
  limits: [
    'Outside the surface: no deviation, on hold.',
    'Loose ground under a rod point is no error of the instrument and not in u.',
  ],
  units: 'Deviation in the project’s unit; the label (C 0.12, F 0.05, GRADE) to its display decimals.',
  sources: [
    'JCGM 106:2012, The role of measurement uncertainty in conformity assessment, 7.4.',
    'NAVEDTRA 14069 (cut and fill notation).',
  ],
};
