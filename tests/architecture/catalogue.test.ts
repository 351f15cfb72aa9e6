import pg from 'pg';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { newDatabase } from '@/tests/setup/hub';
import { APP_ROLE, findings } from './catalogue';

const OWN = `organization_id = (select nullif(current_setting('app.organization_id', true), '')::uuid)`;
const SOUND = `
  create table planted (organization_id uuid not null, id uuid not null, primary key (organization_id, id));
  alter table planted enable row level security;
  alter table planted force row level security;
  create policy tenant on planted to ${APP_ROLE} using (${OWN}) with check (${OWN});
  grant select, insert on planted to ${APP_ROLE};`;

describe('the catalogue of the migrated database', () => {
  let client: pg.Client;
  beforeAll(async () => {
    // A copy of its own: what is planted below is rolled back each time, and the template stays untouched.
    const { superuserUrl } = await newDatabase(inject('cluster'), `catalogue_${process.env.VITEST_POOL_ID}`);
    client = new pg.Client({ connectionString: superuserUrl });
    await client.connect();
  });
  afterAll(() => client.end());

  it('keeps every organization to itself', async () => {
    expect(await findings(client)).toEqual([]);
  });

  /** What is found with something planted, which is then taken out again. */
  async function withPlanted(sql: string): Promise<string[]> {
    await client.query('begin');
    try {
      await client.query(sql);
      return await findings(client);
    } finally {
      await client.query('rollback');
    }
  }

  it('takes a planted table that is as it should be', async () => {
    expect(await withPlanted(SOUND)).toEqual([]);
  });

  const plants: [string, string, string[]][] = [
    [
      'a table without any policy',
      'create table planted (organization_id uuid primary key)',
      [
        'planted: no grant to the app',
        'planted: row security is off',
        'planted: row security does not bind its owner',
        'planted: no policy',
      ],
    ],
    ['a policy taken away', 'drop policy tenant on setups', ['setups: no policy']],
    [
      'row security not forced',
      'alter table setups no force row level security',
      ['setups: row security does not bind its owner'],
    ],
    [
      'row security switched off',
      'alter table people disable row level security',
      ['people: row security is off'],
    ],
    [
      'a policy that lets everything through',
      `create policy loose on events for select to ${APP_ROLE} using (true)`,
      ['events: a policy lets through true'],
    ],
    [
      'a key that the organization does not lead',
      `${SOUND} alter table planted add column name text unique`,
      ['planted: key planted_name_key is led by name'],
    ],
    [
      'a unique index that the organization does not lead',
      `${SOUND} create unique index planted_any on planted (id, organization_id)`,
      ['planted: key planted_any is led by id'],
    ],
    [
      'a right to change what is append-only',
      `grant update (bytes) on raw_bodies to ${APP_ROLE}`,
      ['raw_bodies: append-only, but UPDATE'],
    ],
    [
      'a right to remove events',
      `grant delete on events to ${APP_ROLE}`,
      ['events: append-only, but DELETE'],
    ],
    ['a right for everybody', 'grant select on people to public', ['people: granted to everybody']],
    ['a right that is not needed', `grant trigger on people to ${APP_ROLE}`, ['people: granted TRIGGER']],
    ['the app as owner', `alter table people owner to ${APP_ROLE}`, [`${APP_ROLE}: owns r public.people`]],
    [
      'a role that passes row security by',
      `alter role ${APP_ROLE} bypassrls`,
      [`${APP_ROLE}: has rolbypassrls`],
    ],
    [
      'a function with its owner’s rights',
      'alter function identify_key security definer',
      ["public.identify_key: runs with its owner's rights"],
    ],
  ];
  it.each(plants)('shows %s', async (_, sql, expected) => {
    const found = await withPlanted(sql);
    for (const finding of expected) expect(found).toContain(finding);
  });

  it('shows a foreign key that the organization does not lead', async () => {
    const found = await withPlanted(`${SOUND}
      create table pointing (organization_id uuid not null, target uuid not null, primary key (organization_id, target));
      alter table planted add unique (id, organization_id);
      alter table pointing add constraint pointing_target foreign key (target, organization_id)
        references planted (id, organization_id)`);
    expect(found).toContain('pointing: key pointing_target is led by target');
    expect(await findings(client)).toEqual([]);
  });
});
