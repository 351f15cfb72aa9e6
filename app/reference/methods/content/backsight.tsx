import { Formula, M } from '@/app/reference/methods/Formula';
import { millimetres } from '@/app/reference/methods/figures';
import type { Method } from '@/app/reference/methods/method';
import { Figures, Part, Points } from '@/app/reference/methods/parts';
import { DEFAULT_ACCURACY } from '@/lib/compute/survey/instrument';
import { METHOD_OVER_MARK, METHOD_VERSION } from '@/lib/services/setups/result';

export const backsight: Method = {
  slug: 'over-a-mark',
  title: 'Over a mark, by backsights',
  lead: 'A setup on a known mark, oriented by one or more backsights: the same adjustment, with the axis held by the mark, and checks that tell whether it is the right mark at both ends.',
  group: 'Setups',
  carried: { method: METHOD_OVER_MARK, version: METHOD_VERSION },
  body: (
    <>
      <Part title="The axis">
        <p>
          The tilting axis is held by the mark’s published coordinates and the instrument height, each with
          its standard deviation, the mark’s and the centring’s together:
        </p>
        <Formula>{String.raw`\begin{aligned} E_\mathrm{axis} &= E_\mathrm{mark}, & \sigma^2 &= \sigma_\mathrm{mark}^2 + \sigma_\mathrm{centring}^2 \\ H_\mathrm{axis} &= H_\mathrm{mark} + h_i \end{aligned}`}</Formula>
        <p>
          Everything else is as in a free station: backsights are weighted sights to marks whose own errors
          count.
        </p>
      </Part>
      <Part title="Backsights on their own">
        <p>
          Before any adjustment, distance and difference of heights to each backsight are compared with what
          the published coordinates of both ends make of them, <M>{'d'}</M> with its uncertainty. Beyond the
          class’ residual the setup fails: it is another mark, or one of the two has moved along the line.
        </p>
      </Part>
      <Part title="What is not proven">
        <Points>
          {[
            'A single backsight orients the circle and nothing confirms it: its distance says that it is the right mark along the line, not across it.',
            'Two and more confirm each other. That the instrument stands over its own mark is proven by their distances.',
            'An agreed check on another mark proves both.',
          ]}
        </Points>
      </Part>
    </>
  ),
  figures: (
    <Figures
      caption="Where an instrument states nothing (common practice)"
      rows={[
        { what: 'centring over the mark, an axis', figure: millimetres(DEFAULT_ACCURACY.instrumentCentring) },
      ]}
    />
  ),
  assumes: ['The instrument height was measured to the tilting axis, up from the mark.'],
  limits: [
    'A mark that moved sideways shows neither in a distance nor in a height: shoot a second backsight.',
  ],
  units: 'As of a free station.',
  sources: [
    'Mikhail and Gracie, Analysis and Adjustment of Survey Measurements.',
    'JCGM 100:2008 (uncertainty of the comparisons).',
  ],
};
