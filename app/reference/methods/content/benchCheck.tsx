import { Formula } from '@/app/reference/methods/Formula';
import { feet, metres } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import { GROSS_ERROR } from '@/lib/compute/grade/benchCheck';

export const benchCheck: Method = {
  slug: 'bench-check',
  title: 'Bench check of a blade',
  lead: 'A cutting edge held on a mark of known elevation: what it reads against what is known, whether the blade, an offset or the benchmark is to blame, and what to add to the edge.',
  group: 'Ground and blades',
  body: (
    <>
      <Part title="Difference and correction">
        <Formula>{String.raw`d = \frac1n\sum H_i - H_\mathrm{known} \qquad \mathrm{correction} = -d`}</Formula>
        <p>
          Minus means that the edge reads low and would leave ground high. The spread is the largest repeat
          minus the smallest; the readings count with offsets excluded.
        </p>
      </Part>
      <Part title="Verdict">
        <Points>
          {[
            <>
              <b>hold</b> where the repeats differ among themselves by more than the tolerance.
            </>,
            <>
              <b>fail</b> where their mean is off by more than it; <b>pass</b> otherwise.
            </>,
            <>
              <b>hold</b>, and no correction, where the benchmark was used in the setup’s own fit, is not
              trusted, or the setup was not in force: the blade would be set by what it is to be checked
              against.
            </>,
            'A pass with the wrong surface or offset loaded is held too.',
          ]}
        </Points>
      </Part>
      <Part title="Before the blade is touched">
        <p>
          An edge that is off by the layer’s offset, within the tolerance, is an offset left on or off, not a
          worn blade. Every repeat off by more than {metres(GROSS_ERROR)} is a gross error, and metres read as
          feet, or feet as metres, are named where the figures fit.
        </p>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Common practice, not a rule"
      rows={[
        { what: 'no blade is off by more than', figure: `${metres(GROSS_ERROR)} (${feet(GROSS_ERROR)})` },
      ]}
    />
  ),
  assumes: ['The machine is level and still, its edge on the mark, the benchmark proven by the setup.'],
  limits: [
    'One edge on one mark says nothing of the other edge or of the blade’s tilt: bench both.',
    'Hubtack computes and records; it moves nothing and stops nothing.',
  ],
  units: 'The project’s length unit; active offsets signed as the layer’s.',
  sources: [
    'Common practice of machine guidance: daily benching on a known elevation, outside of the setup’s own control.',
  ],
};
