import { CONTROL, finishElevation, LAYER } from './site';

/** What is asked of the hub for the control as a whole: where to stand, and all of it in one network. */

/** On the subgrade, between ST-5 and ST-6. */
const CROWN = { easting: 5160, northing: 10130 };
/** Off the site to the south-east: all posts lie to one side. */
const SPOIL_HEAP = { easting: 5640, northing: 9720, elevation: 1239.5 };

/** From the pad and from outside it, to the six posts. */
export function setupForecast() {
  const ground = finishElevation(CROWN.easting, CROWN.northing) + LAYER.offset;
  return {
    units: { length: 'ft' },
    instrument: 'TS-1',
    toleranceClass: 'earthwork',
    targets: CONTROL.filter(({ kind }) => kind === 'target').map(({ name }) => name),
    candidates: [
      { name: 'the spoil heap', ...SPOIL_HEAP },
      { name: 'the crown of the pad', ...CROWN, elevation: Number(ground.toFixed(2)) },
    ],
  };
}

/** Published coordinates take part with the deviations that were published with them. */
export function adjustment() {
  return {
    name: 'Control of the yard',
    setups: 'all',
    levelRuns: 'all',
    datum: { kind: 'weighted' },
  };
}
