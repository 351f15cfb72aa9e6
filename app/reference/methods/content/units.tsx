import { Formula, M } from '@/app/reference/methods/Formula';
import { figure } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import { ANGLE, LENGTH, PRESSURE, VOLUME } from '@/lib/compute/units/table';

const ppm = (LENGTH.ftUS / LENGTH.ft - 1) * 1e6;

export const units: Method = {
  slug: 'units',
  title: 'Units and feet',
  lead: 'Every submission declares its units and every answer states its own. Inside the hub there are only metres, radians, kelvins and pascals; a figure is converted once on its way in and once on its way out.',
  group: 'Readings',
  body: (
    <>
      <Part title="Lengths">
        <p>
          The metre, the international foot and the U.S. survey foot are three units. The two feet differ by{' '}
          {figure(ppm, 3)} ppm: nothing in a distance across a site, but {figure((ppm * 2e6) / 1e6, 2)} feet
          in a grid coordinate of two million.
        </p>
        <Formula>{String.raw`1\ \mathrm{ft} = 0.3048\ \mathrm{m} \qquad 1\ \mathrm{ftUS} = \frac{1200}{3937}\ \mathrm{m}`}</Formula>
        <p>
          Values in the other foot than the project’s frame are taken only where the sender says{' '}
          <code className="font-code text-[13px]">confirmUnits: true</code>.
        </p>
      </Part>
      <Part title="Angles">
        <p>
          Degrees, gons and radians are numbers. Degrees, minutes and seconds are text, so that 12.3045 is
          never taken for 12°30′45″; minutes and seconds under 60.
        </p>
        <Formula>{String.raw`\alpha = \pm\left(d + \frac{m}{60} + \frac{s}{3600}\right)\frac{\pi}{180}`}</Formula>
      </Part>
      <Part title="Temperature and volume">
        <Formula>{String.raw`T = t_\mathrm{C} + 273.15 = \tfrac{5}{9}(t_\mathrm{F} - 32) + 273.15`}</Formula>
        <p>
          Volumes are ground volumes. A cubic yard is <M>{String.raw`(3 \times 0.3048)^3`}</M> cubic metres of
          the international foot, whatever the foot of the coordinates.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="What one unit is"
      rows={[
        { what: 'foot, international', figure: `${LENGTH.ft} m`, note: 'exact' },
        { what: 'foot, U.S. survey', figure: `${figure(LENGTH.ftUS, 12)} m`, note: '1200/3937, exact' },
        { what: 'gon', figure: `${figure(ANGLE.gon / ANGLE.deg)}°` },
        { what: 'hectopascal', figure: `${PRESSURE.hPa} Pa` },
        { what: 'millimetre of mercury', figure: `${PRESSURE.mmHg} Pa` },
        { what: 'inch of mercury', figure: `${PRESSURE.inHg} Pa` },
        { what: 'cubic yard', figure: `${figure(VOLUME.yd3, 9)} m³` },
      ]}
    />
  ),
  assumes: [
    'That what a sender declares is what they sent. Declared units that contradict what is known are asked about, not corrected.',
  ],
  limits: [
    'A wrong foot shows in nothing but large coordinates: an explanation of a setup tries it mark by mark, a bench check looks for metres read as feet.',
    'Figures keep full double precision; rounding is the reader’s business.',
  ],
  units: 'Answers state theirs in units; ?length= asks for another one.',
  sources: [
    'NIST Special Publication 811, appendix B (factors); NOAA and NIST, Federal Register notice of 5 October 2020 (the end of the survey foot).',
  ],
};
