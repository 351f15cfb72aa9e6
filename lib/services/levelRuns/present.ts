import type * as z from 'zod';
import { mmPerRootKm } from '@/lib/compute/survey/levelling/accuracy';
import { toArcseconds } from '@/lib/compute/units/convert';
import { MILLIMETRE } from '@/lib/compute/units/table';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import type { LevelRun } from '@/openapi/schemas/levelRun';
import { sectionDeviation } from './differences';
import { presentLimit } from './limit';
import type { LevelRunRow } from './load';
import { LEVEL_METHOD } from './result';
import { levelRadio, wordsOfLevelNote, wordsOfLevelReason } from './words';

/** Radians as millimetres per metre. */
export function asMmPerM(radians: number): number {
  return Number((radians / MILLIMETRE).toPrecision(12));
}

export function presentLevelRun(row: LevelRunRow, length: Lengths): z.output<typeof LevelRun> {
  const { result, sights } = row;
  const { closure, balance, page, line } = result;
  const out = (metres: number) => length.out(metres);
  const maybe = (metres: number | null) => length.outOrNull(metres);
  const reasons = result.reasons.map((reason) => wordsOfLevelReason(reason, length));
  const versions = new Map(result.control.map(({ name, version }) => [name, version]));
  const names = { verdict: row.verdict, from: row.fromPoint, to: row.toPoint };
  return {
    id: row.id,
    clientId: row.clientId,
    from: row.fromPoint,
    to: row.toPoint,
    instrument: row.instrumentName,
    staff: row.staff,
    observedAt: asMoment(row.observedAt),
    verdict: row.verdict,
    reasons,
    notes: result.notes.map((note) => wordsOfLevelNote(note, length)),
    radio: levelRadio(names, closure, reasons, length),
    closure: {
      kind: closure.kind,
      levelled: out(closure.levelled),
      published: maybe(closure.published),
      misclosure: maybe(closure.misclosure),
      allowed: out(closure.allowed),
      standardDeviation: out(closure.standardDeviation),
      limit: presentLimit(result.limit),
    },
    arithmetic: {
      backsights: out(page.backsights),
      foresights: out(page.foresights),
      rises: out(page.rises),
      falls: out(page.falls),
      difference: out(page.difference),
      agrees: page.agrees,
    },
    sights: {
      setups: balance.standings,
      length: out(balance.length),
      lengthSource: balance.measured ? 'measured' : 'assumed',
      backsights: maybe(balance.backsights),
      foresights: maybe(balance.foresights),
      largestImbalance: maybe(balance.largestImbalance),
    },
    collimation: {
      source: line.source,
      pegTestId: row.pegTestId,
      mmPerM: asMmPerM(line.collimation),
      arcsec: toArcseconds(line.collimation),
      sigmaMmPerM: asMmPerM(line.sigma),
      effect: out(balance.collimationEffect),
    },
    curvatureAndRefraction: out(balance.curvatureEffect),
    accuracyMmPerKm: Number(mmPerRootKm(result.doubleRun).toPrecision(12)),
    points: result.lines.map((reduced, i) => {
      const sight = sights[i];
      return {
        point: reduced.point,
        kind: reduced.kind,
        backsight: maybe(sight.backsight),
        intermediate: maybe(sight.intermediate),
        foresight: maybe(sight.foresight),
        backsightDistance: maybe(sight.backsightDistance),
        intermediateDistance: maybe(sight.intermediateDistance),
        foresightDistance: maybe(sight.foresightDistance),
        rise: maybe(reduced.rise),
        fall: maybe(reduced.fall),
        heightOfCollimation: maybe(reduced.heightOfCollimation),
        bookElevation: out(reduced.bookElevation),
        reduction: out(reduced.reduction),
        adjustment: out(reduced.adjustment),
        elevation: out(reduced.elevation),
        standardDeviation: out(reduced.standardDeviation),
        bookedElevation: maybe(sight.bookedElevation),
      };
    }),
    control: result.passed.map((mark) => ({
      point: mark.point,
      version: versions.get(mark.point) ?? 1,
      role: mark.role,
      publishedElevation: out(mark.published),
      levelledElevation: out(mark.levelled),
      difference: out(mark.difference),
      standardDeviation: out(mark.standardDeviation),
      outcome: mark.agrees ? 'agrees' : 'differs',
    })),
    differences: result.differences.map((section) => ({
      from: section.from,
      to: section.to,
      difference: out(section.difference),
      standardDeviation: out(sectionDeviation(section, line)),
      length: out(section.length),
      setups: section.standings,
    })),
    provenance: {
      method: LEVEL_METHOD,
      version: row.methodVersion,
      uploadId: row.uploadId,
      calibrationVersion: row.calibrationVersion,
      control: result.control,
    },
    units: { length: length.unit },
  };
}
