import { testCourier } from '@/tests/api/fixtures/courier';
import { api } from '@/tests/setup/api';

const HOST = 'office.example';

/**
 * Hooks in every state: one that is well but for a message, one that fails, one that its receiver ended, one that was
 * switched off. Their receivers are played.
 *
 * @returns the id of the first
 */
export async function hookedUp(url: string, key: string): Promise<string> {
  const caller = api(url, key);
  const make = async (path: string, description: string, eventTypes: string[] | null, enabled = true) => {
    const body = { url: `https://${HOST}/hooks/${path}`, description, eventTypes, enabled };
    const { body: made } = await caller.post('/webhook-endpoints', body).expect(201);
    return made.endpoint.id as string;
  };
  const hand = testCourier(HOST);
  const happen = async (name: string) => {
    const project = { name, lengthUnit: 'ft', frame: { kind: 'local' } };
    await caller.post('/projects', project).expect(201);
    hand.catchUp();
  };
  hand.answerWith(({ url: to }) => {
    if (to.endsWith('/old')) return { status: 410, body: 'Gone.' };
    return to.endsWith('/quantities') ? { failure: 'timed_out' } : { status: 204 };
  });
  await make('old', 'Last year’s sheet', ['project.*']);
  await make('trial', 'Trial script', null, false);
  await make('quantities', 'Quantities', ['project.*', 'grade.*']);
  const first = await make('radio', 'Site radio', ['setup.*', 'withdrawal.*', 'project.created']);
  await happen('Osprey Hollow basin');
  await hand.until(3);
  hand.answerWith(() => ({ status: 503, body: '{"error":"The desk is closed until six."}' }));
  await happen('Larkspur ramp');
  await hand.until(5);
  hand.answerWith(() => ({ status: 204 }));
  await caller.post(`/webhook-endpoints/${first}/rotate`, { overlapMinutes: 1440 }).expect(201);
  await caller.post(`/webhook-endpoints/${first}/test`).expect(202);
  hand.catchUp();
  await hand.until(6);
  return first;
}
