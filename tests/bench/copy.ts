import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import type { Stage } from './stage';

/** What an upload writes, each table behind those that it refers to, with the rows of the upload `$id`. */
const WRITTEN = {
  raw_bodies: 'id = (select raw_body_id from uploads where id = $id)',
  uploads: 'id = $id',
  setups: 'upload_id = $id',
  setup_results: 'setup_id in (select id from setups where upload_id = $id)',
  observations: 'setup_id in (select id from setups where upload_id = $id)',
  grade_checks: 'upload_id = $id',
  events: 'xid = (select xid from events where subject = $id::text)',
  audit_entries: 'request_id = (select request_id from audit_entries where subject = $id::text)',
};
const TABLES = Object.keys(WRITTEN) as (keyof typeof WRITTEN)[];

/**
 * The baseline of a bulk upload: the same rows by psql's \copy, as the owner, into twins of the tables with the same
 * columns, checks, indexes and foreign keys. (The tables themselves refuse COPY: their row security binds the owner.)
 * A twin gets the very rows that the API wrote, upload by upload, so that it is as full as its original.
 */
export class CopyBaseline {
  private readonly folder = mkdtempSync(join(tmpdir(), 'hubtack-bench-'));

  constructor(private readonly stage: Stage) {}

  async prepare(): Promise<void> {
    const foreignKeys = await this.stage.sql<{ table: string; definition: string }>(
      `select conrelid::regclass::text as "table", pg_get_constraintdef(oid) as definition
        from pg_constraint where contype = 'f' and conrelid::regclass::text = any($1)`,
      [TABLES],
    );
    await this.psql(this.stage.ownerUrl, [
      'create schema twin;',
      ...TABLES.map((table) => `create table twin.${table} (like public.${table} including all);`),
      // Among the twins where the table referred to has one.
      'set search_path = twin, public;',
      ...foreignKeys.map(({ table, definition }) => `alter table twin.${table} add ${definition};`),
    ]);
  }

  /**
   * Copies the rows of the uploads whose clientIds begin with `prefix`, a transaction for each, in one session.
   *
   * @returns uploads a second, by psql's own timing
   */
  async uploadsPerSecond(prefix: string): Promise<number> {
    const uploads = await this.stage.sql<{ id: string }>(
      'select id from uploads where client_id like $1 order by id',
      [`${prefix}%`],
    );
    const file = (id: string, table: string) => join(this.folder, `${id}.${table}`);
    await this.psql(
      this.stage.superuserUrl,
      uploads.flatMap(({ id }) =>
        TABLES.map((table) => {
          const rows = `select * from ${table} where ${WRITTEN[table].replaceAll('$id', `'${id}'::uuid`)}`;
          return `\\copy (${rows}) to '${file(id, table)}'`;
        }),
      ),
    );
    const said = await this.psql(this.stage.ownerUrl, [
      '\\timing on',
      ...uploads.flatMap(({ id }) => [
        'begin;',
        ...TABLES.filter((table) => statSync(file(id, table)).size > 0).map(
          (table) => `\\copy twin.${table} from '${file(id, table)}'`,
        ),
        'commit;',
      ]),
    ]);
    for (const { id } of uploads) for (const table of TABLES) rmSync(file(id, table));
    const times = [...said.matchAll(/^Time: ([\d.]+) ms/gm)].map(([, milliseconds]) => Number(milliseconds));
    return uploads.length / (times.reduce((sum, time) => sum + time, 0) / 1000);
  }

  end(): void {
    rmSync(this.folder, { recursive: true, force: true });
  }

  private async psql(url: string, lines: readonly string[]): Promise<string> {
    const script = join(this.folder, 'script.sql');
    writeFileSync(script, lines.join('\n'));
    const program = join(this.stage.cluster.binDirectory, 'psql');
    const options = ['--no-psqlrc', '--set=ON_ERROR_STOP=1', `--file=${script}`, url];
    const { stdout } = await promisify(execFile)(program, options, { maxBuffer: 64 * 1024 * 1024 });
    return stdout;
  }
}
