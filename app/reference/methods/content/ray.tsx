import { Formula, M } from '@/app/reference/methods/Formula';
import { feet, figure, metres } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import { DEFAULT_SURROUNDINGS, MEAN_EARTH_RADIUS } from '@/lib/compute/survey/surroundings';
import { LENGTH } from '@/lib/compute/units/table';

const { refraction, refractionSigma } = DEFAULT_SURROUNDINGS;
const lift = (distance: number) => ((1 - refraction) * (distance * LENGTH.ft) ** 2) / (2 * MEAN_EARTH_RADIUS);

export const ray: Method = {
  slug: 'curvature-and-refraction',
  title: 'Curvature and refraction',
  lead: 'The sight from the tilting axis to a reflector over a round earth, through air that bends it: how ground distance and difference of height make slope distance and zenith angle, and the other way round.',
  group: 'Readings',
  body: (
    <>
      <Part title="The ray">
        <p>
          With the ground distance <M>{'D'}</M> at the axis’ level, the reflector higher by{' '}
          <M>{String.raw`\Delta h`}</M>, the earth’s radius <M>{'R'}</M> and the coefficient of refraction{' '}
          <M>{'k'}</M>:
        </p>
        <Formula>{String.raw`\begin{aligned} Y &= D\Bigl(1 + \frac{\Delta h}{R}\Bigr) & X &= \Delta h - \frac{D^2}{2R} \\[4pt] S &= \sqrt{X^2 + Y^2} & z &= \operatorname{atan2}(Y, X) - \frac{kD}{2R} \end{aligned}`}</Formula>
        <p>
          <M>{'Y'}</M> lies across the station’s plumb line, <M>{'X'}</M> along it. Grid distance is the
          project’s combined factor times <M>{'D'}</M>, applied once and to horizontal distances only.
        </p>
        <p>
          The way back, from a reading to a place, repeats the same relations until they agree; a slope
          distance without a zenith angle is brought to the horizontal by the known difference of heights.
        </p>
      </Part>
      <Part title="What it comes to">
        <p>
          Without it, ground would come out too low by <M>{'(1-k)D^2/2R'}</M>: {feet(lift(500), 3)} at 500 ft,{' '}
          {feet(lift(1000), 3)} at 1,000 ft.
        </p>
      </Part>
      <Part title="How far k is known">
        <p>
          Near warm ground <M>{'k'}</M> may be anything, and it is the same for all sights of one setup. So it
          is one unknown of the setup, held at {refraction} with a standard deviation of {refractionSigma}:
          what refraction may do to a height is in that height’s standard deviation, and repeats do not shrink
          it.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Unless the project says otherwise"
      rows={[
        { what: 'coefficient of refraction k', figure: figure(refraction), note: 'Gauss’s mean value' },
        {
          what: 'its standard deviation',
          figure: figure(refractionSigma),
          note: 'common practice near the ground',
        },
        {
          what: 'radius of the earth R',
          figure: metres(MEAN_EARTH_RADIUS),
          note: 'IUGG mean radius of GRS 80',
        },
        { what: 'combined factor', figure: figure(DEFAULT_SURROUNDINGS.combinedFactor) },
      ]}
    />
  ),
  assumes: ['A sphere, and air whose refractive index falls evenly with height along the sight.'],
  limits: [
    'To second order in D/R: below 0.01 mm within a kilometre.',
    'Shimmer over a hot haul road is no constant k: shoot heights over short sights, or in the morning.',
  ],
  units: 'Metres and radians inside.',
  sources: [
    'Torge and Müller, Geodesy, §5.5; Moritz, Geodetic Reference System 1980 (radius).',
    'Tested against the ray that Bouguer’s law follows, step by step (Born and Wolf, Principles of Optics, §3.2).',
  ],
};
