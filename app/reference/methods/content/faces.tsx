import { Formula, M } from '@/app/reference/methods/Formula';
import { arcseconds, millimetres } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import { DEFAULT_ACCURACY } from '@/lib/compute/survey/instrument';

export const faces: Method = {
  slug: 'faces-and-sets',
  title: 'Faces, sets and weights',
  lead: 'Readings in two faces and their repeats become one mean a set, free of collimation and vertical index; and every mean gets the standard deviation that its weight comes from.',
  group: 'Readings',
  body: (
    <>
      <Part title="Means">
        <p>
          A face-right direction is turned by half a turn, a face-right zenith angle is a full turn minus its
          reading. Within a set the faces are meaned, and their difference tells the instrument’s errors:
        </p>
        <Formula>{String.raw`\begin{aligned} r &= \frac12\bigl(r_L + r_R - \pi\bigr) & 2c &= (r_L - r_R + \pi)\,\sin z \\[4pt] z &= \frac12\bigl(z_L + 2\pi - z_R\bigr) & i &= \frac12\bigl(z_L + z_R - 2\pi\bigr) \end{aligned}`}</Formula>
        <p>
          The setup reports their means over all pairs, with the scatter of the pairs beside what is stated:{' '}
          <M>{'2c'}</M> is twice the collimation at the horizon, <M>{'i'}</M> the vertical index.
        </p>
      </Part>
      <Part title="Standard deviations">
        <p>
          An instrument states the angle that ISO 17123-3 tests: one direction observed in both faces,{' '}
          <M>{String.raw`\sigma_\mathrm{ISO}`}</M>. A single reading counts <M>{String.raw`\sqrt2`}</M> of it,
          so that <M>{'m'}</M> readings in one face and <M>{'n'}</M> in the other, or <M>{'n'}</M> in one face
          alone, give
        </p>
        <Formula>{String.raw`\sigma_{m,n} = \sigma_\mathrm{ISO}\sqrt{\frac12\Bigl(\frac1m + \frac1n\Bigr)} \qquad \sigma_{0,n} = \sigma_\mathrm{ISO}\sqrt{\frac2n}`}</Formula>
        <p>
          The mean of <M>{'n'}</M> distances: <M>{String.raw`\sigma_S = (a + b\,S)/\sqrt n`}</M>, constant and
          proportional part added, as stated.
        </p>
      </Part>
      <Part title="One face alone">
        <p>
          Then collimation and index remain in every reading, the same in all of them. They become unknowns of
          the setup, held at zero by what the instrument states; one mark in both faces makes them known.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Where an instrument states nothing (common practice), one standard deviation each"
      rows={[
        { what: 'direction, both faces', figure: arcseconds(DEFAULT_ACCURACY.direction) },
        { what: 'zenith angle, both faces', figure: arcseconds(DEFAULT_ACCURACY.zenith) },
        {
          what: 'distance',
          figure: `${millimetres(DEFAULT_ACCURACY.distance)} + ${DEFAULT_ACCURACY.distancePpm} ppm`,
        },
        { what: 'collimation and index left in one face', figure: arcseconds(DEFAULT_ACCURACY.collimation) },
        { what: 'centring of a reflector, an axis', figure: millimetres(DEFAULT_ACCURACY.targetCentring) },
        { what: 'height of a target', figure: millimetres(DEFAULT_ACCURACY.targetHeight) },
        {
          what: 'centring of the instrument over a mark',
          figure: millimetres(DEFAULT_ACCURACY.instrumentCentring),
        },
      ]}
    />
  ),
  assumes: [
    'One collimation and one index hold through the setup.',
    'A reflector that stands on its mark at one height is one erection: its centring and height errors are the same in all its readings.',
  ],
  limits: [
    'A reading on the wrong side of its face is refused, not turned.',
    'Trunnion axis tilt is meaned out by two faces and not estimated from one.',
  ],
  units: 'Angles in any declared unit; 2c and index are answered in seconds of arc.',
  sources: [
    'Ghilani and Wolf, Elementary Surveying, ch. 8 (means of faces).',
    'ISO 17123-3 (directions and zenith angles) and ISO 17123-4 (distances): what a stated accuracy means.',
  ],
};
