import { Figure } from '@/app/ui/Figure';
import { type Entry, Ledger } from '@/app/ui/Ledger';
import { COORDINATE, fixed, sexagesimal, signed, stated, unitSign } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import type { ShownSetup } from './SetupSheet';

export function Standing({ setup }: { setup: ShownSetup }) {
  const { position, standardDeviations: sd, units } = setup;
  const unit = unitSign(units.length);
  const length = (name: string, value: number | null, deviation: number | null): Entry => ({
    name,
    value: value === null ? 'none' : <Figure label={name} value={fixed(value, COORDINATE)} unit={unit} />,
    beside: value === null || deviation === null ? null : `± ${fixed(deviation, COORDINATE)}`,
  });
  return (
    <Ledger
      title="Where it stands"
      note={`in ${unit}, ± one standard deviation`}
      entries={[
        length('Easting', position.easting, sd.easting),
        length('Northing', position.northing, sd.northing),
        length('Mark elevation', position.elevation, sd.elevation),
        length('Instrument elevation', setup.instrumentElevation, sd.elevation),
        {
          name: 'Circle zero',
          value:
            setup.orientation === null ? (
              'none'
            ) : (
              <Figure label="Circle zero" value={sexagesimal(setup.orientation, 1)} />
            ),
          beside: sd.orientationArcsec === null ? undefined : `± ${fixed(sd.orientationArcsec, 1)}″`,
        },
      ]}
    />
  );
}

export function Fit({ setup }: { setup: ShownSetup }) {
  const { fit, geometry, accuracyAtWork: work, errorEllipse, units, faceErrors } = setup;
  const unit = unitSign(units.length);
  const within = (name: string, value: number | null, limit: number): Entry => {
    if (value === null) return { name, value: 'none', beside: unit };
    const text = `${fixed(value, COORDINATE)} of ${stated(limit, units.length)}`;
    return value > limit
      ? { name, value: <State tone="hold">{text}</State>, beside: `${unit}, over` }
      : { name, value: text, beside: unit };
  };
  const entries: Entry[] = [
    { name: 'Spread of the fit, σ₀', value: fixed(fit.sigma0, 2), beside: 'of 1' },
    { name: 'Spare observations', value: fit.degreesOfFreedom },
    {
      name: 'Global test',
      value: (
        <State tone={fit.chiSquare.passed ? 'pass' : 'fail'}>
          {fit.chiSquare.passed ? 'accepted' : 'outside'}
        </State>
      ),
      beside: `${fixed(fit.chiSquare.value, 1)} of ${fixed(fit.chiSquare.upper, 1)}`,
    },
    { name: 'Targets around the horizon', value: `${fixed(geometry.spreadDegrees, 0)}°` },
    {
      name: '95 % ellipse',
      value: `${fixed(errorEllipse.semiMajor, COORDINATE)} × ${fixed(errorEllipse.semiMinor, COORDINATE)}`,
      beside: unit,
    },
    within(`At ${fixed(work.radius, 0)} ${unit}, in plan`, work.horizontal, work.limits.horizontal),
    within(`At ${fixed(work.radius, 0)} ${unit}, in height`, work.vertical, work.limits.vertical),
  ];
  const seconds = (name: string, value: number | null, sigma: number | null) => {
    if (value === null) return;
    const beside = sigma === null ? undefined : `± ${fixed(sigma, 1)}″`;
    entries.push({ name, value: `${fixed(value, 1)}″`, beside });
  };
  if (faceErrors) {
    seconds('Collimation, 2c', faceErrors.twoCollimationArcsec, faceErrors.twoCollimationSigmaArcsec);
    seconds('Vertical index', faceErrors.verticalIndexArcsec, faceErrors.verticalIndexSigmaArcsec);
  }
  return <Ledger title="How well it fits" entries={entries} />;
}

/** Distances and heights to the backsights of a setup over a mark, against published coordinates. */
export function Backsights({ setup }: { setup: ShownSetup }) {
  const { occupied, backsights, units } = setup;
  if (!occupied) return null;
  const unit = unitSign(units.length);
  const entries = backsights.flatMap(({ target, distance, height }): Entry[] =>
    [
      { name: `${target}, distance`, compared: distance },
      { name: `${target}, height`, compared: height },
    ].map(({ name, compared }): Entry => {
      if (!compared) return { name, value: 'not read' };
      const { difference, tolerance, outcome } = compared;
      const text = `${signed(difference, COORDINATE)} of ${stated(tolerance, units.length)}`;
      return outcome === 'over'
        ? { name, value: <State tone="fail">{text}</State>, beside: `${unit}, over` }
        : { name, value: text, beside: unit };
    }),
  );
  return (
    <Ledger title={`Backsights from ${occupied.point}`} note="measured minus published" entries={entries} />
  );
}
