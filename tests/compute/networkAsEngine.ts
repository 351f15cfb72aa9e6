import type { CoordinateDatum, NetworkInput, NetworkPoint } from '@/lib/compute/survey/networkInput';
import type { Shot } from '@/lib/compute/survey/shots';
import type { SimulatedNetwork } from '@/tests/simulator/siteNetwork';

/** A simulated network in the form that the engine takes, its control in the datum given. */
export function networkAsEngine(
  network: SimulatedNetwork,
  datum: CoordinateDatum = 'weighted',
  snooping = false,
): NetworkInput {
  const { ground, instrument, refraction } = network;
  return {
    points: network.control.map(
      ({ name, sigma, easting, northing, elevation }): NetworkPoint => ({
        ...{ name, easting, northing, elevation },
        ...{ horizontalDatum: datum, verticalDatum: datum, horizontalSigma: sigma, verticalSigma: sigma },
      }),
    ),
    setups: network.setups.map(({ id, occupied, instrumentHeight, pointings }) => ({
      ...{
        id,
        occupied,
        instrumentHeight: occupied === null ? null : instrumentHeight,
        accuracy: instrument,
        ppm: 0,
      },
      shots: pointings.map(
        (pointing, i): Shot => ({
          id: `${i + 1}`,
          target: pointing.target,
          purpose: 'orient',
          face: pointing.face,
          set: pointing.set,
          direction: pointing.horizontal,
          zenith: pointing.zenith,
          distance: {
            slopeDistance: pointing.slopeDistance,
            prismConstantMm: 0,
            prismConstantAppliedMm: 0,
            appliedPpm: 0,
          },
          targetHeight: pointing.targetHeight,
          targetCentringSigma: null,
          targetHeightSigma: null,
        }),
      ),
    })),
    levelDifferences: network.levelled.map(({ id, from, to, difference, length }) => ({
      ...{ id, from, to, difference },
      weight: { by: 'length', length, sigmaPerRootKilometre: network.levelSigma },
    })),
    positions: network.positions,
    baselines: network.baselines,
    surroundings: {
      ...ground,
      refraction: refraction.mean,
      refractionSigma: refraction.sigma,
      unknownAtmospherePpm: 10,
    },
    snooping,
  };
}
