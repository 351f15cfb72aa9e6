import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { controlPointVersions, StatusAct } from '@/db/schema';
import type { LengthUnit } from '@/lib/compute/units/table';
import { Lengths } from '@/lib/services/lengths';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import type { ControlPoint, ControlStatusAct } from '@/openapi/schemas/control';
import type { CurrentControl } from './load';

type VersionRow = InferSelectModel<typeof controlPointVersions>;

/** Coordinates and accuracy of a version in a unit: in the unit they came in, the very numbers that came. */
export function presentCoordinates(version: VersionRow, unit: LengthUnit) {
  const { submitted } = version;
  const length = new Lengths(unit);
  const echo = submitted.unit === unit;
  return {
    easting: echo ? submitted.easting : length.out(version.easting),
    northing: echo ? submitted.northing : length.out(version.northing),
    elevation: echo ? submitted.elevation : length.outOrNull(version.elevation),
    sigma:
      echo && submitted.sigma
        ? submitted.sigma
        : { horizontal: length.out(version.sigmaHorizontal), vertical: length.out(version.sigmaVertical) },
    sigmaSource: submitted.sigma ? ('stated' as const) : ('projectDefault' as const),
    kind: version.kind,
    description: version.description,
    adjustmentId: version.adjustmentId,
  };
}

function presentStatusAct(act: StatusAct | null): z.output<typeof ControlStatusAct> | null {
  return (
    act && {
      by: { kind: act.by.kind, name: act.by.name },
      at: asMoment(act.at),
      text: act.note,
      lastGoodAt: asMomentOrNull(act.seen?.lastGoodAt ?? null),
    }
  );
}

export function presentControlPoint(
  { point, version }: CurrentControl,
  unit: LengthUnit,
): z.output<typeof ControlPoint> {
  return {
    name: point.name,
    status: point.status,
    ...presentCoordinates(version, unit),
    version: version.version,
    statusAct: presentStatusAct(point.statusAct),
    units: { length: unit },
    updatedAt: asMoment(point.updatedAt),
  };
}
