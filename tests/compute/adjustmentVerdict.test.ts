import { expect, it } from 'vitest';
import { adjustNetwork } from '@/lib/compute/survey/network';
import { judgeAdjustment } from '@/lib/services/adjustments/judge';
import { seededChance } from '@/tests/simulator/chance';
import { simulateNetwork } from '@/tests/simulator/siteNetwork';
import { networkAsEngine } from './networkAsEngine';

it('the verdict on a network counts what was observed or published, and nothing that was assumed', () => {
  const network = networkAsEngine(
    simulateNetwork(
      {
        ...{ setups: 6, points: 22, sightsOfPoint: 4, faces: ['left', 'right'], sets: 1, occupiedEvery: 0 },
        ...{ controlEvery: 5, controlSigma: 0.002, roverEvery: 0, levelled: 8, baselines: 0 },
      },
      seededChance(3),
    ),
    'weighted',
  );
  const result = adjustNetwork(network);
  const assumed = ['instrumentCentring', 'instrumentHeight', 'targetCentring', 'targetHeight', 'refraction'];
  const errors = [...assumed, 'collimation', 'verticalIndex', 'scale'];
  const count = result.observations.filter(({ kind }) => !errors.includes(kind)).length;
  expect(count).toBeLessThan(result.observations.length);
  const { reasons } = judgeAdjustment(
    { network, setups: [], control: [], levelRuns: [], unseen: [], ambiguous: [] },
    {
      ...{ setups: 'all', levelRuns: 'all', snooping: false, since: null, until: null },
      datum: { kind: 'weighted', points: null },
    },
    result,
  );
  expect(reasons).toContainEqual({
    ...{ code: 'network_fits', observations: count, redundancy: result.test.degreesOfFreedom },
  });
});
