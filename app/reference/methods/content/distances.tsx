import { Formula, M } from '@/app/reference/methods/Formula';
import { figure } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part } from '@/app/reference/methods/parts';
import {
  atmosphericPpm,
  DEFAULT_HUMIDITY,
  DEFAULT_WAVELENGTH,
  groupRefractivity,
  REFERENCE_ATMOSPHERE,
  refractivity,
} from '@/lib/compute/survey/atmosphere';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';

const hot = atmosphericPpm({ temperature: 313.15, pressure: 85_000, humidity: DEFAULT_HUMIDITY });

export const distances: Method = {
  slug: 'distances',
  title: 'Distances: prism and air',
  lead: 'From the distance on the display to the true slope distance: the reflector’s constant and the speed of light in the air that it was measured through, each applied once, whatever the instrument had applied already.',
  group: 'Readings',
  body: (
    <>
      <Part title="True slope distance">
        <Formula>{String.raw`S = \bigl(S_\mathrm{read} + c - c_\mathrm{applied}\bigr)\bigl(1 + (p - p_\mathrm{applied})\,10^{-6}\bigr)`}</Formula>
        <p>
          <M>{'c'}</M> is the reflector’s constant, counted from the distance meter’s own zero and negative
          for most prisms; <M>{'p'}</M> the correction for the air in ppm, positive where it lengthens. What
          the instrument had applied itself is taken off again. All three statements are required with a
          distance; reflectorless, both constants are 0.
        </p>
      </Part>
      <Part title="Speed of light in air">
        <p>
          The group refractivity of standard air at 0 °C and 1013.25 hPa, <M>{String.raw`\lambda`}</M> in µm;
          then that of the air on site with temperature <M>{'T'}</M> in K, station pressure <M>{'P'}</M> and
          vapour pressure <M>{'e'}</M> in hPa:
        </p>
        <Formula>{String.raw`\begin{aligned} N_g &= 287.6155 + \frac{4.8866}{\lambda^2} + \frac{0.0680}{\lambda^4} \\[4pt] N &= \frac{273.15}{1013.25}\,\frac{N_g\,P}{T} - \frac{11.27\,e}{T} \\[4pt] e &= h \cdot 6.1078 \cdot 10^{\,7.5t/(237.3+t)} \end{aligned}`}</Formula>
        <p>
          The first velocity correction is the refractivity that the instrument was set up for minus that of
          the air:
        </p>
        <Formula>{String.raw`p = N_\mathrm{reference} - N`}</Formula>
        <p>
          On a hot day high up, 40 °C and 850 hPa, it comes to {figure(hot, 2)} ppm:{' '}
          {figure((hot * 500) / 1e6, 2)} ft in 500 ft.
        </p>
      </Part>
      <Part title="Without an atmosphere">
        <p>
          Where no temperature and pressure came, the correction that the instrument applied stands, and all
          distances of the setup share one unknown scale with a standard deviation of{' '}
          {DEFAULT_SURROUNDINGS.unknownAtmospherePpm} ppm, about 10 °C. The setup says so.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Where an instrument states nothing (common practice)"
      rows={[
        { what: 'carrier wavelength', figure: `${figure(DEFAULT_WAVELENGTH * 1e9)} nm` },
        {
          what: 'group refractivity of standard air',
          figure: figure(groupRefractivity(DEFAULT_WAVELENGTH), 7),
        },
        {
          what: 'air that the meter is set up for',
          figure: `${figure(REFERENCE_ATMOSPHERE.temperature - 273.15)} °C, ${figure(REFERENCE_ATMOSPHERE.pressure / 100)} hPa, ${figure(100 * REFERENCE_ATMOSPHERE.humidity)} %`,
        },
        {
          what: 'its refractivity',
          figure: figure(refractivity(REFERENCE_ATMOSPHERE, DEFAULT_WAVELENGTH), 7),
        },
        {
          what: 'humidity where none was read',
          figure: `${figure(100 * DEFAULT_HUMIDITY)} %`,
          note: 'its whole range is worth 1 ppm',
        },
      ]}
    />
  ),
  assumes: [
    'One temperature and one pressure hold along the whole sight.',
    'The pressure is that of the station, not reduced to sea level. One that is far from the standard atmosphere (ISO 2533) at the site’s elevation is refused.',
  ],
  limits: [
    'The closed formula is good to 1 ppm for visible and near-infrared carriers.',
    'The bend of the ray belongs to the next method; the second velocity correction is far below a tenth of a millimetre on a site and left out.',
  ],
  units: 'Constants in mm, corrections in ppm, lengths in the submission’s unit.',
  sources: [
    'IUGG and IAG resolutions of 1999; Rüeger, Refractive Index Formulae for Radio and Light Waves (2002).',
    'Magnus formula over water; ISO 2533:1975, Standard Atmosphere.',
  ],
};
