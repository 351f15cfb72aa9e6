import { asc, eq } from 'drizzle-orm';
import { controlPoints, instruments } from '@/db/schema';
import { FORECAST_DEFAULTS, type ForecastTask } from '@/lib/compute/survey/forecast';
import { invalidItems } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { asMark, byNames, type CurrentControl, currentControl } from '@/lib/services/control/load';
import { currentInstruments } from '@/lib/services/instruments/load';
import type { InstrumentRow } from '@/lib/services/instruments/present';
import { Lengths, otherFoot } from '@/lib/services/lengths';
import { classLimits, loadClasses } from '@/lib/services/projects/classes';
import { loadProject, surroundingsOf } from '@/lib/services/projects/load';
import type { JsonOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setupForecasts';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';

export type ForecastBody = JsonOf<typeof contract.forecastSetups>;

/** A request in SI units, with what stands in the project of what it names. */
export interface ForecastPlan {
  task: ForecastTask;
  instrument: InstrumentRow;
  targets: CurrentControl[];
  className: string;
  /** Whether the class asks for a check that no forecast can take. */
  checkRequired: boolean;
  instrumentHeight: number;
  /** Of the ground where a candidate states none, m. */
  ground: number;
  length: Lengths;
}

/** @throws Problem where the request names what the project does not have */
export async function readPlan(
  { tenant, caller }: VerbContext,
  projectId: string,
  body: ForecastBody,
): Promise<ForecastPlan> {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, projectId);
  const isNamed = eq(instruments.name, body.instrument);
  const [instrument] = await currentInstruments(tenant, organizationId, project.id, isNamed);
  const classes = await loadClasses(tenant, organizationId, [project.id]);
  const { toleranceClass = classes[0].name } = body;
  const limits = classes.find(({ name }) => name === toleranceClass);
  const wanted = body.targets ? byNames(body.targets) : eq(controlPoints.status, 'trusted');
  const targets = await currentControl(tenant, organizationId, project.id, wanted).orderBy(
    asc(controlPoints.name),
  );
  const problems = [
    ...wrongInstrument(instrument, body.instrument),
    ...wrongTargets(targets, body.targets ?? []),
  ];
  if (!limits) {
    const names = classes.map(({ name }) => name).join(', ');
    const detail = `${toleranceClass} is none of ${names}.`;
    problems.push(problemItem('/toleranceClass', 'tolerance_class_unknown', detail));
  }
  const foot = otherFoot(project.lengthUnit, body.units.length, body.confirmUnits, '/units/length');
  if (foot) problems.push(foot);
  if (problems.length > 0 || !limits) throw invalidItems(problems);

  const length = new Lengths(body.units.length);
  const metres = (sent: number | undefined, otherwise: number) =>
    sent === undefined ? otherwise : length.in(sent);
  const longest = metres(body.maximumRange, FORECAST_DEFAULTS.longestSight);
  return {
    task: {
      targets: targets.map(asMark),
      plan: {
        faces: body.faces === 'both' ? ['left', 'right'] : ['left'],
        sets: body.sets,
        kinds: body.observe,
        targetHeight: metres(body.targetHeight, 0),
      },
      sight: { shortest: FORECAST_DEFAULTS.shortestSight, longest },
      accuracy: instrument.calibration,
      surroundings: surroundingsOf(project),
      atmosphereKnown: body.atmosphereMeasured,
      limits: classLimits({ ...limits, workRadius: metres(body.workRadius, limits.workRadius) }),
    },
    instrument,
    targets,
    className: limits.name,
    checkRequired: limits.checkRequired,
    instrumentHeight: metres(body.instrumentHeight, FORECAST_DEFAULTS.instrumentHeight),
    ground: metres(body.elevation, meanElevation(targets) ?? project.siteElevation ?? 0),
    length,
  };
}

function wrongInstrument(row: InstrumentRow | undefined, name: string): ProblemItem[] {
  if (!row) {
    const detail = `There is no instrument ${name} in this project.`;
    return [problemItem('/instrument', 'instrument_unknown', detail)];
  }
  if (row.instrument.kind === 'totalStation') return [];
  const detail = `${name} is no total station: a ${row.instrument.kind} shoots no setup.`;
  return [problemItem('/instrument', 'invalid_value', detail, 'Name a total station.')];
}

function wrongTargets(found: readonly CurrentControl[], names: readonly string[]): ProblemItem[] {
  return names.flatMap((name, i) => {
    const pointer = `/targets/${i}`;
    if (names.indexOf(name) < i) return [problemItem(pointer, 'name_repeated')];
    const row = found.find(({ point }) => point.name === name);
    if (!row) {
      const detail = `There is no control point ${name} in this project.`;
      return [problemItem(pointer, 'target_unknown', detail)];
    }
    if (row.point.status !== 'quarantined') return [];
    const detail = `${name} is quarantined: its shots would take no part in a setup.`;
    return [problemItem(pointer, 'invalid_value', detail, 'Leave it out, or trust the point again.')];
  });
}

/** Of the targets that have one, m. */
function meanElevation(targets: readonly CurrentControl[]): number | null {
  const known = targets.flatMap(({ version }) => version.elevation ?? []);
  return known.length === 0 ? null : known.reduce((sum, value) => sum + value, 0) / known.length;
}
