import { run } from './children.mjs';
import { Failure } from './failure.mjs';
import { get } from './get.mjs';
import { lastLines, openLog } from './logs.mjs';

/** On an empty hub makes the demo's people and its key, and keeps them beside the data. */
export async function makePeople(folder, state, env) {
  if (state.values.demo) return false;
  const written = await run(
    'The demo sign-ins could not be made.',
    process.execPath,
    ['--import', 'tsx', 'scripts/demo.ts'],
    {
      env,
      capture: true,
      log: openLog(folder, 'demo'),
    },
  );
  const { created, people, key } = JSON.parse(lastLines(written, 1));
  if (!created) return false;
  state.values.demo = { people, key };
  state.save();
  return true;
}

/** Runs the demo's day on site through the public API, once. */
export async function walk(folder, state, address) {
  const { demo } = state.values;
  if (!demo || demo.walked) return false;
  const written = await run(
    'The demo scenario could not be posted.',
    process.execPath,
    ['examples/node/walk.mjs', '--json'],
    {
      env: { ...process.env, HUBTACK_URL: address.localUrl, HUBTACK_KEY: demo.key },
      capture: true,
      log: openLog(folder, 'demo'),
      remedy: 'The hub itself is running. The next start tries it again.',
    },
  );
  const { projectId, setupId, layer } = JSON.parse(lastLines(written, 1));
  demo.walked = { projectId, setupId, layer };
  state.save();
  return true;
}

/** What the hub says now of the demo's setup and of its layer. */
export async function readVerdicts(state, address) {
  const { key, walked } = state.values.demo;
  const project = `${address.localUrl}/api/v1/projects/${walked.projectId}`;
  const [setup, summary] = await Promise.all([
    read(`${project}/setups/${walked.setupId}`, key),
    read(`${project}/layers/${encodeURIComponent(walked.layer)}/summary`, key),
  ]);
  return [
    { subject: `Setup ${setup.station}`, verdict: setup.verdict, radio: setup.radio },
    { subject: `Layer ${walked.layer}`, verdict: summary.verdict, radio: summary.radio },
  ];
}

async function read(url, key) {
  const { status, text } = await get(url, { authorization: `Bearer ${key}` });
  if (status === 200) return JSON.parse(text);
  throw new Failure(`The demo's results could not be read: ${url} answers ${status}.`, {
    tail: lastLines(text),
  });
}
