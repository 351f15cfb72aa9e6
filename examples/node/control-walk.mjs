// Proving the ground you stand on, through the hub's public API: where to stand, three setups that lean on the control,
// their network adjusted, and the control that comes of it. Needs Node.js 20 and nothing else:
//
//   HUBTACK_URL=http://localhost:3000 HUBTACK_KEY=htk_… node control-walk.mjs
//
// Every run makes a project of its own.
import { readFile } from 'node:fs/promises';
import { setTimeout as wait } from 'node:timers/promises';

const say = (line = '') => console.log(line);

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

/** Sends a request to a path as the hub itself writes them; its JSON and its headers. A problem ends the walk. */
async function exchange(method, path, body, step = path) {
  const headers = { Authorization: `Bearer ${key}` };
  if (body !== undefined) headers['Content-Type'] = 'application/json';
  // A second try carries the same key: what was done already is not done twice, its answer comes again.
  if (method === 'POST') headers['Idempotency-Key'] = `${started}-${step}`;
  for (let tries = 1; ; tries++) {
    const response = await fetch(`${hub}${path}`, { method, headers, body }).catch((error) => error);
    const failed = response instanceof Error;
    const pause = failed ? 1 : response.headers.get('retry-after');
    if (!response.ok && pause !== null && tries < 3) {
      await wait(pause * 1000);
      continue;
    }
    if (failed) stop(`${hub} does not answer (${response.cause?.code ?? response.message}).`);
    const answer = await response.json().catch(() => stop(`${hub} answers, but not as a hub does.`));
    if (response.ok) return { answer, headers: response.headers };
    stop(`${method} ${path}: ${answer.status} ${answer.code}. ${answer.detail}`, answer.errors);
  }
}

const send = (path, value, step) => exchange('POST', path, JSON.stringify(value), step);
const post = async (...request) => (await send(...request)).answer;
const get = async (path) => (await exchange('GET', path)).answer;

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

/** Asks after a job until it has ended, no oftener than the hub wants to be asked, and reads what came of it. */
async function finish({ answer: job, headers }) {
  const at = headers.get('location');
  while (job.status === 'queued' || job.status === 'running') {
    await wait(headers.get('retry-after') * 1000);
    ({ answer: job, headers } = await exchange('GET', at));
  }
  if (job.status !== 'succeeded')
    stop(`Job ${job.id} ${job.status}: ${job.problem?.code}. ${job.problem?.detail}`, job.problem?.errors);
  return get(job.result);
}

/** Every item of a list, page by page. */
async function all(path) {
  const items = [];
  let cursor = '';
  do {
    const page = await get(`${path}&limit=200${cursor && `&cursor=${cursor}`}`);
    items.push(...page.data);
    cursor = page.nextCursor;
  } while (cursor);
  return items;
}

const ft = (value) => `${value.toFixed(3)} ft`;

function saySetup({ station, verdict, radio, reasons, position, errorEllipse }, how) {
  say(`\nSetup ${station} ${how}: ${verdict.toUpperCase()}`);
  say(`  ${radio}`);
  say(
    `  E ${ft(position.easting)}, N ${ft(position.northing)}, good to ${ft(errorEllipse.semiMajor)} at 95 %`,
  );
  for (const { text } of reasons.slice(0, 3)) say(`  - ${text}`);
}

// The control as it was published, the instruments, and the benchmarks levelled through.
const name = `Thistledown Yard control by Node, ${started.slice(0, 19)}Z`;
const project = await post('/api/v1/projects', { name, lengthUnit: 'ft', frame: { kind: 'local' } });
const site = `/api/v1/projects/${project.id}`;
say(`Project: ${project.name}, ${project.id}`);
const control = await post(`${site}/control-points`, await data('control'));
if (control.refused.length > 0) stop('Some control was refused:', control.refused);
say(`Control: ${control.counts.created} points`);
await post(`${site}/instruments`, await data('instrument'), 'station');
await post(`${site}/instruments`, await data('level'), 'level');
const [run] = (await upload('level-run')).levelRuns;
say(
  `Level run ${run.from} to ${run.to}: ${run.verdict.toUpperCase()}, misclosure ${ft(run.closure.misclosure)}`,
);

// Where to stand, before anybody walks there.
const forecast = await post(`${site}/setup-forecasts`, await data('setup-forecast'));
say(`\nForecast: ${forecast.summary}`);

// Over the gate's benchmark; then on the pad by angles alone, and by shots of which nobody named the targets.
const [backsight] = (await upload('setup-backsight')).setups;
saySetup(backsight, `over ${backsight.occupied.point} by backsights`);
const [angles] = (await upload('setup-angles-only')).setups;
saySetup(angles, 'by angles alone');
const [unnamed] = (await upload('setup-identify')).setups;
const { matched, reflectors } = unnamed.identification;
saySetup(unnamed, `by ${matched} of ${reflectors} reflectors identified`);

// What all of them together say of one mark.
const mark = `${site}/control-points/HT-103`;
const before = await get(mark);
say(`\nControl ${before.name}, version ${before.version}: ${before.health.finding.toUpperCase()}`);
say(`  ${before.health.text}`);

// All of it in one network. It takes longer than a request: the hub answers with a job.
const adjustment = await finish(await send(`${site}/adjustments`, await data('adjustment')));
const at = `${site}/adjustments/${adjustment.id}`;
const { fit, reasons } = adjustment.result;
say(
  `\nAdjustment "${adjustment.name}": ${adjustment.verdict.toUpperCase()}, sigma0 ${fit.sigma0.toFixed(2)}`,
);
for (const { text } of reasons) say(`  - ${text}`);
// Where nothing else controls an observation, it has no w.
const tested = (await all(`${at}/observations?removed=false`)).filter(
  ({ standardised }) => standardised !== null,
);
const [worst] = tested.sort((a, b) => Math.abs(b.standardised) - Math.abs(a.standardised));
if (worst) {
  const what = [worst.kind, worst.setup, worst.levelRun, worst.to, worst.component].filter(Boolean).join(' ');
  say(
    `  Worst residual: ${what}, ${worst.residual.toFixed(3)} ${worst.unit}, w ${worst.standardised.toFixed(2)}`,
  );
}

// A trial run until somebody applies it: a pass may be, a hold by another person with a note, a fail never.
if (adjustment.verdict === 'pass') {
  const applied = await post(`${at}/apply`, {});
  say(`  Applied: ${applied.points.length} points have a new version`);
  const now = await get(mark);
  say(
    `  ${now.name}, version ${now.version}: E ${ft(now.easting)}, N ${ft(now.northing)}, elevation ${ft(now.elevation)}`,
  );
  say(`  sigma in plan ${ft(now.sigma.horizontal)}, was ${ft(before.sigma.horizontal)}`);
} else {
  const why = { hold: 'on hold, another person applies it with a note', fail: 'a fail stays a trial run' };
  say(`  Not applied: ${why[adjustment.verdict]}.`);
}
