import { beforeAll, describe, expect, it } from 'vitest';
import type * as z from 'zod';
import type { Setup } from '@/openapi/schemas/setup';
import { walkOn } from '@/tests/console/site';
import { api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';

let setups: Map<string, z.output<typeof Setup>>;
beforeAll(async () => {
  const { hub, key } = await newOrganization();
  const { projectId } = await walkOn(hub.url, key);
  const { body } = await api(hub.url, key).get(`/projects/${projectId}/setups`).expect(200);
  const oldestFirst = (body.data as z.output<typeof Setup>[]).reverse();
  setups = new Map(
    oldestFirst.filter(({ supersedes }) => supersedes === null).map((setup) => [setup.station, setup]),
  );
}, 60_000);

describe('explanations', () => {
  it('of a setup that fits are none', () => {
    expect(setups.get('ST-1')?.explanations).toEqual([
      expect.objectContaining({ fault: 'none', subject: null, size: null, unit: null, weight: 1 }),
    ]);
  });

  it('name a wrong prism constant with its size in millimetres, and lead the radio line', () => {
    const { explanations, radio, reasons } = setups.get('ST-2')!;
    const [first] = explanations;
    expect(first).toMatchObject({ fault: 'distanceConstant', subject: null, unit: 'mm' });
    expect(first.weight).toBeGreaterThan(0.9);
    expect(Math.abs(first.size! - 30)).toBeLessThan(3);
    expect(radio).toContain('Check the prism constant: every distance comes out');
    expect(radio).toContain('mm too long');
    // What to do is said once; to shoot each mark again would help nobody.
    expect(reasons.filter(({ action }) => action?.startsWith('Shoot'))).toEqual([]);
  });

  it('name a mark that was bumped, in the project’s unit', () => {
    const [first] = setups.get('ST-3')!.explanations;
    expect(first).toMatchObject({ fault: 'targetMoved', subject: 'HT-103', unit: 'ft' });
    expect(first.weight).toBeGreaterThan(0.9);
    expect(first.confirm).toContain('HT-103');
  });

  it('weigh 1 together, heaviest first', () => {
    for (const { explanations } of setups.values()) {
      const weights = explanations.map(({ weight }) => weight);
      expect(weights.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 9);
      expect(weights).toEqual([...weights].sort((a, b) => b - a));
    }
  });
});
