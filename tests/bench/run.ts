import { availableParallelism, cpus } from 'node:os';
import { CopyBaseline } from './copy';
import { manyGradeShots, manySetups, oneSetup } from './documents';
import { fitsPerSecond, forecastCellsPerSecond, setupsPerSecond } from './engine';
import { type Figure, isMet, table } from './figures';
import { type FirstLoad, firstLoads } from './firstLoad';
import { identificationSection } from './identify';
import { CONNECTIONS, live, uploads } from './load';
import { networkSection } from './network';
import { powerCut } from './powerCut';
import { newSite } from './site';
import { setStage } from './stage';

const ROUNDS = 5;
/** The web process compiles its hot paths only after some thousands of requests. */
const WARM_UPLOADS = 6_000;
const UPLOADS_A_ROUND = 1_500;
const LIVE_A_ROUND = 5_000;
const WARM_BULKS = 64;
const BULKS_A_ROUND = 32;
const ITEMS = 1_000;
const MOST_FIRST_LOAD = 180_000;

const reportOnly = process.argv.includes('--report');
const say = (text = '') => process.stdout.write(`${text}\n`);
const times = <T>(count: number, work: () => T) => Array.from({ length: count }, work);

say(`Node.js ${process.version}, ${availableParallelism()} × ${cpus()[0].model}`);
const kilobytes = (bytes: number) => (bytes / 1000).toFixed(1);
const lineOf = ({ page, now, later }: FirstLoad) =>
  `${kilobytes(now).padStart(6)}  ${page}${later > 0 ? ` (and ${kilobytes(later)} once it stands)` : ''}`;

setupsPerSecond(2);
const engine: Figure[] = [
  { name: 'setups solved and judged', measured: times(ROUNDS, () => setupsPerSecond(1)) },
  { name: 'stations fitted', measured: times(ROUNDS, () => fitsPerSecond(1)) },
  {
    name: 'cells of a forecast, 8 targets',
    measured: times(ROUNDS, () => forecastCellsPerSecond(1)),
    target: 1_250,
  },
].map((figure) => ({ target: 2_000, ...figure, unit: '/s on one core', baseline: null }));

say('Identifying targets …');
const identificationMet = identificationSection(say);
say('Adjusting a network …');
const networkMet = networkSection(say);

const stage = await setStage();
const copies = new CopyBaseline(stage);
try {
  await copies.prepare();
  const loads = await firstLoads(stage.hub.url);
  const site = await newSite(stage.hub.url, stage.key, 'Bench');
  let count = 0;
  const numbered = (prefix: string, body: (id: string) => Buffer) => () => body(`${prefix}-${count++}`);

  say(`Warming up: ${WARM_UPLOADS.toLocaleString('en')} uploads …`);
  await live(stage.hub.url, LIVE_A_ROUND);
  await uploads(site, WARM_UPLOADS, numbered('warm', oneSetup));
  await stage.sql('analyze');
  const upload: Figure = {
    name: 'upload of one setup of 8 shots',
    measured: [],
    unit: 'uploads/s',
    baseline: { name: 'GET /api/health/live', measured: [] },
    target: 0.3,
  };
  for (let round = 1; round <= ROUNDS; round++) {
    upload.baseline?.measured.push(await live(stage.hub.url, LIVE_A_ROUND));
    upload.measured.push(await uploads(site, UPLOADS_A_ROUND, numbered(`u${round}`, oneSetup)));
  }

  say('Warming up: uploads of 1,000 items …');
  const bulks = [
    { name: 'upload of 1,000 grade shots', body: manyGradeShots() },
    { name: 'upload of 125 setups, 1,000 shots', body: manySetups() },
  ].map(({ name, body }, i) => {
    const baseline = { name: 'by \\copy', measured: [] as number[] };
    const figure: Figure = { name, measured: [], unit: 'items/s', baseline, target: 0.2 };
    return { body, figure, baseline, prefix: `bulk${i}` };
  });
  for (const { prefix, body } of bulks) await uploads(site, WARM_BULKS, numbered(`warm-${prefix}`, body));
  await stage.sql('analyze');
  for (let round = 1; round <= ROUNDS; round++) {
    for (const { prefix, body, figure, baseline } of bulks) {
      const name = `${prefix}-${round}`;
      figure.measured.push(ITEMS * (await uploads(site, BULKS_A_ROUND, numbered(name, body))));
      baseline.measured.push(ITEMS * (await copies.uploadsPerSecond(`${name}-`)));
    }
  }

  say('Cutting the power of PostgreSQL under load …');
  const cut = await powerCut(stage);

  const figures = [...engine, upload, ...bulks.map(({ figure }) => figure)];
  say(`\nMedian of ${ROUNDS} rounds, ${CONNECTIONS} connections, one web process\n`);
  say(table(figures));
  say(`
\\copy: the rows that the API wrote, upload by upload, by psql as owner into twins of the tables (same columns, checks,
indexes and foreign keys, as full as the tables themselves).

Power cut: ${cut.acknowledged} uploads answered 201, ${cut.lost.length} of them lost, ${cut.broken.length} not whole or not once, ${cut.strays} stray rows;
${cut.unacknowledged} more stand whole whose answer was cut off. ${cut.unavailable} requests answered 503 meanwhile; ready again ${Math.round(cut.readyAfterMs)} ms after
the database was.`);
  say(`
First-load JavaScript of each page, kB of gzip, under ${kilobytes(MOST_FIRST_LOAD)} each
${loads.map(lineOf).join('\n')}`);
  const light = loads.every(({ now }) => now < MOST_FIRST_LOAD);
  const durable = cut.acknowledged > 0 && cut.lost.length + cut.broken.length + cut.strays === 0;
  if (!(figures.every(isMet) && identificationMet && networkMet && light && durable) && !reportOnly)
    process.exitCode = 1;
} finally {
  copies.end();
  await stage.end();
}
