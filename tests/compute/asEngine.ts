import type { InstrumentAccuracy } from '@/lib/compute/survey/instrument';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import type { fitStation } from '@/lib/compute/survey/stationFit';
import type { Surroundings } from '@/lib/compute/survey/surroundings';
import type { Instrument, Observed, Pointing, PublishedMark, Site } from '@/tests/simulator/observe';

type FitInput = Parameters<typeof fitStation>[0] & { control: Map<string, ControlMark>; shots: Shot[] };

/** An observed setup in the form that the engine takes. */
export function asEngine({ site, instrument, published, pointings }: Observed): FitInput {
  return {
    shots: pointings.map((pointing) => asShot(pointing, site)),
    control: new Map(published.map((mark) => [mark.name, asMark(mark)])),
    accuracy: asAccuracy(instrument),
    surroundings: asSurroundings(site),
    ppm: site.ppmSigma > 0 ? null : site.ppm,
  };
}

export function asShot(pointing: Pointing, site: Site, purpose: Shot['purpose'] = 'orient'): Shot {
  return {
    id: `${pointing.target}/${pointing.reflector}/${pointing.set}/${pointing.face}`,
    target: pointing.target,
    purpose,
    face: pointing.face,
    set: pointing.set,
    direction: pointing.horizontal,
    zenith: pointing.zenith,
    distance: {
      slopeDistance: pointing.slopeDistance,
      prismConstantMm: site.prismConstantMm,
      prismConstantAppliedMm: site.prismConstantAppliedMm,
      appliedPpm: site.appliedPpm,
    },
    targetHeight: pointing.targetHeight,
    targetCentringSigma: null,
    targetHeightSigma: null,
  };
}

export function asMark(mark: PublishedMark, status: ControlMark['status'] = 'trusted'): ControlMark {
  return { ...mark, version: 1, status };
}

function asAccuracy(instrument: Instrument): InstrumentAccuracy {
  return { ...instrument, instrumentCentring: 0.001 };
}

function asSurroundings(site: Site): Surroundings {
  return {
    combinedFactor: site.combinedFactor,
    refraction: site.refraction.mean,
    refractionSigma: site.refraction.sigma,
    earthRadius: site.earthRadius,
    unknownAtmospherePpm: site.ppmSigma,
  };
}
