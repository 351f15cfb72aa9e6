import { control, controlCsv, finish, instrument, layer } from './design';
import { level, levelRun } from './levelling';
import { adjustment, setupForecast } from './network';
import {
  anglesOnlySetup,
  backsightSetup,
  bumpedTargetSetup,
  goodSetup,
  laterCheck,
  unnamedSetup,
  wrongPrismSetup,
} from './setups';
import { benchAfter, benchBefore, gradeShots, machine, release } from './work';

export const DATA_FOLDER = new URL('../../../examples/data/', import.meta.url);

/** Every file of examples/data by its name: the same bytes at every run. */
export function dataFiles(): Record<string, string> {
  const documents = {
    control: control(),
    instrument: instrument(),
    machine: machine(),
    level: level(),
    'level-run': levelRun(),
    finish: finish(),
    layer: layer(),
    'setup-good': goodSetup(),
    'setup-wrong-prism': wrongPrismSetup(),
    'setup-bumped-target': bumpedTargetSetup(),
    'setup-backsight': backsightSetup(),
    'setup-angles-only': anglesOnlySetup(),
    'setup-identify': unnamedSetup(),
    'setup-forecast': setupForecast(),
    adjustment: adjustment(),
    release: release(),
    'bench-before': benchBefore(),
    'setup-check': laterCheck(),
    'bench-after': benchAfter(),
    'grade-shots': gradeShots(),
  };
  const json = Object.entries(documents).map(([name, value]) => [`${name}.json`, `${layOut(value)}\n`]);
  return { ...Object.fromEntries(json), 'control.csv': controlCsv() };
}

/** JSON as people read it: a row of a list (a shot, a point) or a few plain values on one line. */
function layOut(value: unknown, indent = '', isRow = false): string {
  if (typeof value !== 'object' || value === null) return JSON.stringify(value);
  const line = onOneLine(value);
  const isPlain = Object.values(value).every((item) => typeof item !== 'object');
  if (indent !== '' && (isRow || (isPlain && line.length <= 100))) return line;
  const deeper = `${indent}  `;
  if (!Array.isArray(value)) {
    const fields = Object.entries(value).map(([key, item]) => `${deeper}"${key}": ${layOut(item, deeper)}`);
    return `{\n${fields.join(',\n')}\n${indent}}`;
  }
  const rows = value.map((item) => deeper + layOut(item, deeper, value.length > 1));
  return `[\n${rows.join(',\n')}\n${indent}]`;
}

function onOneLine(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(onOneLine).join(', ')}]`;
  if (typeof value !== 'object' || value === null) return JSON.stringify(value);
  const fields = Object.entries(value).filter(([, item]) => item !== undefined);
  return `{ ${fields.map(([key, item]) => `"${key}": ${onOneLine(item)}`).join(', ')} }`;
}
