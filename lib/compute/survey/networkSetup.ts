import type { Neighbour, ObservationName } from './networkModel';
import type { SetupReadings } from './networkReadings';
import type { AssumedKind } from './networkResult';
import { ABSENT, type NetworkUnknowns, type Place } from './networkUnknowns';
import type { Surroundings } from './surroundings';

type Assume = (value: number, sigma: number, name: ObservationName) => Place;

/** What the readings of one setup share, each made when a reading first needs it. */
export class SetupPlaces {
  readonly standing: Neighbour;
  orientation: Place = ABSENT;
  instrumentHeight: Place = ABSENT;
  /** Of the instrument, then of each reflector; centring along the ray by its kind. */
  private readonly made: Partial<Record<AssumedKind | 'across', Place>>[];

  constructor(
    private readonly own: SetupReadings,
    private readonly places: NetworkUnknowns,
    private readonly assume: Assume,
  ) {
    const { id, occupied } = own.setup;
    this.made = [{}, ...own.erections.map(() => ({}))];
    this.standing = occupied === null ? { of: 'station', name: id } : { of: 'point', name: occupied };
  }

  /** Easting and northing of the mark under the instrument, or of the free station. */
  plan(): [Place, Place] {
    const { id, occupied } = this.own.setup;
    return occupied === null
      ? [this.places.station(id, 'easting'), this.places.station(id, 'northing')]
      : [this.places.point(occupied, 'easting'), this.places.point(occupied, 'northing')];
  }

  /** The tilting axis, or the mark under it with the error of the instrument's height. */
  axis(): [Place, Place] {
    const { id, occupied, instrumentHeight } = this.own.setup;
    if (occupied === null || instrumentHeight === null) return [this.places.station(id, 'elevation'), ABSENT];
    this.instrumentHeight = this.error('instrumentHeight', 0, this.own.setup.accuracy.targetHeight);
    return [this.places.point(occupied, 'elevation'), this.instrumentHeight];
  }

  circle(start: number | null): Place {
    if (start === null) return ABSENT;
    if (this.orientation === ABSENT) {
      const name = { kind: 'orientation', point: null, setup: this.own.setup.id } as const;
      this.orientation = this.places.unknown(start, name);
    }
    return this.orientation;
  }

  centring(): [Place, Place] {
    if (this.own.setup.occupied === null) return [ABSENT, ABSENT];
    const sigma = this.own.setup.accuracy.instrumentCentring;
    return [
      this.error('instrumentCentring', 0, sigma, 'along'),
      this.error('instrumentCentring', 0, sigma, 'across'),
    ];
  }

  reflector(erection: number): [Place, Place] {
    const sigma = this.own.erections[erection].centringSigma;
    return [
      this.error('targetCentring', 0, sigma, 'along', erection),
      this.error('targetCentring', 0, sigma, 'across', erection),
    ];
  }

  reflectorHeight(erection: number): Place {
    return this.error('targetHeight', 0, this.own.erections[erection].heightSigma, null, erection);
  }

  refraction({ refraction, refractionSigma }: Surroundings): Place {
    return this.error('refraction', refraction, refractionSigma);
  }

  collimation(): Place {
    return this.error('collimation', 0, this.own.setup.accuracy.collimation);
  }

  verticalIndex(): Place {
    return this.error('verticalIndex', 0, this.own.setup.accuracy.collimation);
  }

  /** Scale of all distances less one, where the atmosphere is unknown. */
  scale({ unknownAtmospherePpm }: Surroundings): Place {
    return this.own.setup.ppm === null ? this.error('scale', 0, unknownAtmospherePpm * 1e-6) : ABSENT;
  }

  private error(
    kind: AssumedKind,
    value: number,
    sigma: number,
    component: 'along' | 'across' | null = null,
    erection = -1,
  ): Place {
    const own = this.made[erection + 1];
    const key = component === 'across' ? 'across' : kind;
    if (own[key] !== undefined) return own[key];
    const { setup, erections } = this.own;
    const target = erection < 0 ? null : erections[erection].target;
    const place = this.assume(value, sigma, {
      kind,
      source: setup.id,
      from: setup.occupied,
      to: target,
      component,
      set: null,
      shots: [],
      near: target === null ? [this.standing] : [this.standing, { of: 'point', name: target }],
    });
    own[key] = place;
    return place;
  }
}
