// A day on a site through the hub's public API. Needs Node.js 20 and nothing else:
//
//   HUBTACK_URL=http://localhost:3000 HUBTACK_KEY=htk_… node walk.mjs
//
// Every run makes a project of its own. With --json the last line holds the result for programs.
import { readFile } from 'node:fs/promises';
import { setTimeout as wait } from 'node:timers/promises';

const lines = [];
function say(line = '') {
  lines.push(line);
  console.log(line);
}

function stop(what, errors = []) {
  console.error(what);
  for (const { pointer, code, detail, fix } of errors)
    console.error(`  ${pointer} (${code}): ${detail} ${fix}`);
  process.exit(1);
}

const setting = (name) => process.env[name] || stop(`Set ${name} first; examples/README.md says how.`);
const hub = setting('HUBTACK_URL').replace(/\/+$/, '');
const key = setting('HUBTACK_KEY');
const started = new Date().toISOString();

/** Sends a request and answers its JSON. A problem ends the walk. */
async function call(method, path, body, step = path) {
  const headers = { Authorization: `Bearer ${key}` };
  if (body !== undefined) headers['Content-Type'] = 'application/json';
  // A second try carries the same key: what was done already is not done twice, its answer comes again.
  if (method === 'POST') headers['Idempotency-Key'] = `${started}-${step}`;
  for (let tries = 1; ; tries++) {
    const response = await fetch(`${hub}/api/v1${path}`, { method, headers, body }).catch((error) => error);
    const failed = response instanceof Error;
    const pause = failed ? 1 : response.headers.get('retry-after');
    if (!response.ok && pause !== null && tries < 3) {
      await wait(pause * 1000);
      continue;
    }
    if (failed) stop(`${hub} does not answer (${response.cause?.code ?? response.message}).`);
    const answer = await response.json().catch(() => stop(`${hub} answers, but not as a hub does.`));
    if (response.ok) return answer;
    stop(`${method} ${path}: ${answer.status} ${answer.code}. ${answer.detail}`, answer.errors);
  }
}

const post = (path, value, step) => call('POST', path, JSON.stringify(value), step);

/** A file of examples/data, with the present time where it says NOW. */
async function data(name) {
  const text = await readFile(new URL(`../data/${name}.json`, import.meta.url), 'utf8');
  return JSON.parse(text.replaceAll('"NOW"', `"${new Date().toISOString()}"`));
}

/** Uploads a file of observations. An item that was refused ends the walk too, though its neighbours are in. */
async function upload(name) {
  const receipt = await post(`${site}/uploads`, await data(name), name);
  if (receipt.refused.length > 0) stop(`Some of ${name} was refused:`, receipt.refused);
  return receipt;
}

const ft = (value, decimals = 2) => (value === null ? '(none)' : `${value.toFixed(decimals)} ft`);

function saySetup(setup, how = '') {
  const { verdict, radio, reasons, position, instrumentElevation, geometry, fit, checks } = setup;
  say();
  say(`Setup ${setup.station}${how}: ${verdict.toUpperCase()}`);
  say(`  ${radio}`);
  say(
    `  E ${ft(position.easting, 3)}, N ${ft(position.northing, 3)}, axis ${ft(instrumentElevation, 3)};` +
      ` ${geometry.targets} targets, sigma0 ${fit.sigma0.toFixed(2)}`,
  );
  for (const { text } of reasons.slice(0, 3)) say(`  - ${text}`);
  if (reasons.length > 3) say(`  - and ${reasons.length - 3} reasons more`);
  checks.forEach(sayCheck);
}

function sayCheck({ targets }) {
  for (const { target, role, difference, horizontal, vertical } of targets) {
    const plan = Math.hypot(difference.easting, difference.northing);
    say(
      `  Check on ${target} (${role}): ${ft(plan, 3)} in plan, ${horizontal};` +
        ` ${ft(difference.elevation, 3)} in height, ${vertical}`,
    );
  }
}

function sayLevel({ instrument, from, to, verdict, radio, closure, reasons }, test) {
  say();
  say(
    `Level ${instrument}: ${test.verdict.toUpperCase()}, line of sight ${test.collimation.arcsec.toFixed(1)}″`,
  );
  say(`Level run ${from} to ${to}: ${verdict.toUpperCase()}, misclosure ${ft(closure.misclosure, 3)}`);
  say(`  ${radio}`);
  for (const { text } of reasons) say(`  - ${text}`);
}

function sayBench({ machine, edge, benchmark, difference, verdict, instruction }) {
  say();
  say(`Bench check ${machine}, ${edge} edge on ${benchmark}: ${verdict.toUpperCase()}, ${ft(difference)}`);
  say(`  ${instruction}`);
}

// What the office brings in.
const name = `Thistledown Yard, ${started.slice(0, 19).replace('T', ' ')}`;
const project = await post('/projects', { name, lengthUnit: 'ft', frame: { kind: 'local' } });
const site = `/projects/${project.id}`;
say(`Project: ${project.name}, ${project.id}`);

const control = await post(`${site}/control-points`, await data('control'));
if (control.refused.length > 0) stop('Some control was refused:', control.refused);
say(`Control: ${control.counts.created} points`);

const { name: instrument, calibration } = await post(
  `${site}/instruments`,
  await data('instrument'),
  'station',
);
const { name: dozer } = await post(`${site}/instruments`, await data('machine'), 'machine');
const { directionArcsec, distanceMm, distancePpm } = calibration.accuracy;
say(
  `Instruments: ${instrument}, ${directionArcsec}″ and ${distanceMm} mm + ${distancePpm} ppm; dozer ${dozer}`,
);

const surface = await post(`${site}/surfaces`, await data('finish'));
say(`Surface: ${surface.name}, ${surface.points} points, ${surface.triangles} triangles`);

const layer = await post(`${site}/layers`, { ...(await data('layer')), surfaceId: surface.id });
const { below, above } = layer.tolerance;
say(`Layer: ${layer.name}, ${layer.offsetText}, ${ft(below)} low to ${ft(above)} high`);

// Both benchmarks are levelled through before anybody leans on them, with a level that was tested that morning.
await post(`${site}/instruments`, await data('level'), 'level');
const { pegTests, levelRuns } = await upload('level-run');
sayLevel(levelRuns[0], pegTests[0]);

// A setup on four targets in both faces, with a check shot on a benchmark outside the fit.
const [good] = (await upload('setup-good')).setups;
saySetup(good);
if (good.verdict !== 'pass') stop('This setup should have passed.');

// Put in force for the dozer, together with what it is to cut.
const { release, radio } = await post(`${site}/setups/${good.id}/release`, await data('release'));
say(
  `  Released to ${release.machine} for ${release.layer}, offset ${ft(release.offset)}, until ${release.validUntil}`,
);
say(`  ${radio}`);

// Two setups that must not be used: a forgotten prism constant, and a target that a truck has bumped.
const [wrongPrism] = (await upload('setup-wrong-prism')).setups;
saySetup(wrongPrism);
const [bumped] = (await upload('setup-bumped-target')).setups;
saySetup(bumped);

// The second one again without the bumped target: a new setup that supersedes it.
const { shots } = (await data('setup-bumped-target')).setups[0];
const exclude = shots.filter(({ target }) => target === 'HT-103').map(({ clientId }) => clientId);
const refit = await post(`${site}/setups/${bumped.id}/refits`, {
  exclude,
  reason: 'The post of HT-103 leans.',
});
saySetup(refit, ', refitted without HT-103');

// The blade reads low on a benchmark. The setup is checked first, then the edge corrected and benched again.
const [before] = (await upload('bench-before')).benchChecks;
sayBench(before);
const [check] = (await upload('setup-check')).setupChecks;
say();
say(
  `Setup ${good.station} checked again: ${check.agreed ? 'AGREED' : 'NOT AGREED'}, verdict ${check.setupVerdict}`,
);
sayCheck(check);
const [after] = (await upload('bench-after')).benchChecks;
sayBench(after);

// A lot of grade, shot from the good setup.
const { gradeChecks } = await upload('grade-shots');
const summary = await call('GET', `${site}/layers/${layer.name}/summary`);
const { verdicts } = summary;
say();
say(`Layer ${summary.layer}: ${summary.verdict.toUpperCase()}`);
say(`  ${summary.radio}`);
for (const { text } of summary.reasons) say(`  - ${text}`);
say(
  `  Mean ${ft(summary.mean, 3)}, standard deviation ${ft(summary.standardDeviation, 3)} of ${summary.count} shots`,
);
say(`  Shot by shot: ${verdicts.pass} pass, ${verdicts.hold} too close to call, ${verdicts.fail} fail`);
for (const { clientId, label, point, verdict } of gradeChecks) {
  if (verdict !== 'pass')
    say(`  ${clientId} ${label} ${verdict} at E ${ft(point.easting, 1)}, N ${ft(point.northing, 1)}`);
}

if (process.argv.includes('--json')) {
  console.log(JSON.stringify({ projectId: project.id, setupId: good.id, layer: layer.name, lines }));
}
