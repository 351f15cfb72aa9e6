import { readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import type * as z from 'zod';
import type { Setup } from '@/openapi/schemas/setup';
import { api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';
import { DATA_FOLDER } from './generator/files';
import { ANGLES_ONLY, OVER_MARK, UNNAMED } from './generator/setups';

/** The setups of examples/data beside resections: other ways to set up on the same site. */
const setups = new Map<string, z.output<typeof Setup>>();

beforeAll(async () => {
  const { hub, key } = await newOrganization();
  const { post } = api(hub.url, key);
  const data = (name: string) =>
    JSON.parse(
      readFileSync(new URL(`${name}.json`, DATA_FOLDER), 'utf8').replaceAll(
        '"NOW"',
        '"2031-04-12T13:41:00Z"',
      ),
    );
  const frame = { kind: 'local' };
  const project = await post('/projects', { name: 'Other setups', lengthUnit: 'ft', frame }).expect(201);
  const site = `/projects/${project.body.id}`;
  await post(`${site}/control-points`, data('control')).expect(201);
  await post(`${site}/instruments`, data('instrument')).expect(201);
  for (const name of ['setup-backsight', 'setup-angles-only', 'setup-identify']) {
    const { body } = await post(`${site}/uploads`, data(name)).expect(201);
    expect(body.refused).toEqual([]);
    setups.set(name, body.setups[0]);
  }
}, 60_000);

describe('the setup over a mark', () => {
  it('passes on two backsights, with an agreed check on the other benchmark', () => {
    const { verdict, method, occupied, backsights, checks } = setups.get('setup-backsight')!;
    expect({ verdict, method }).toEqual({ verdict: 'pass', method: 'backsight' });
    expect(occupied).toMatchObject({ point: 'BM-1' });
    const outcomes = backsights.map(({ target, distance, height }) => [
      target,
      distance!.outcome,
      height!.outcome,
    ]);
    expect(outcomes).toEqual([
      ['HT-104', 'agreed', 'agreed'],
      ['HT-106', 'agreed', 'agreed'],
    ]);
    expect(checks.map(({ agreed }) => agreed)).toEqual([true]);
  });

  it('finds the station where the simulation put it', () => {
    const { position, instrumentElevation, orientation } = setups.get('setup-backsight')!;
    expect(Math.abs(position.easting - OVER_MARK.axis.easting)).toBeLessThan(0.02);
    expect(Math.abs(position.northing - OVER_MARK.axis.northing)).toBeLessThan(0.02);
    expect(Math.abs(instrumentElevation! - OVER_MARK.axis.elevation)).toBeLessThan(0.02);
    expect(Math.abs(orientation! - OVER_MARK.orientation) * 3600).toBeLessThan(20);
  });
});

describe('the setup by directions alone', () => {
  it('finds the station where the simulation put it, and does not fail', () => {
    const { verdict, position, instrumentElevation, orientation, targets } = setups.get('setup-angles-only')!;
    expect(verdict).not.toBe('fail');
    expect(Math.abs(position.easting - ANGLES_ONLY.axis.easting)).toBeLessThan(0.03);
    expect(Math.abs(position.northing - ANGLES_ONLY.axis.northing)).toBeLessThan(0.03);
    expect(Math.abs(instrumentElevation! - ANGLES_ONLY.axis.elevation)).toBeLessThan(0.03);
    expect(Math.abs(orientation! - ANGLES_ONLY.orientation) * 3600).toBeLessThan(20);
    for (const { observations } of targets)
      expect(observations.map(({ kind }) => kind)).toEqual(['direction', 'zenith']);
  });
});

describe('the setup without names', () => {
  it('finds the five posts, the station where the simulation put it, and one reflector that is none of them', () => {
    const { verdict, position, orientation, targets, identification } = setups.get('setup-identify')!;
    expect(verdict).toBe('pass');
    expect(identification).toMatchObject({ ambiguous: false, reflectors: 6, matched: 5 });
    expect(targets.map(({ target }) => target)).toEqual([
      'HT-101',
      'HT-102',
      'HT-103',
      'HT-105',
      'HT-106',
      null,
    ]);
    expect(targets.at(-1)).toMatchObject({ used: false, shots: ['st-6/4', 'st-6/9'] });
    expect(Math.abs(position.easting - UNNAMED.axis.easting)).toBeLessThan(0.02);
    expect(Math.abs(position.northing - UNNAMED.axis.northing)).toBeLessThan(0.02);
    expect(Math.abs(orientation! - UNNAMED.orientation) * 3600).toBeLessThan(20);
  });
});
