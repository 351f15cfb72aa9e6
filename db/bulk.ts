import { createHash } from 'node:crypto';
import type { InferInsertModel } from 'drizzle-orm';
import { getTableConfig, type PgColumn, type PgTable } from 'drizzle-orm/pg-core';
import type { NamedStatement, Tenant } from './tenant';

interface Column {
  key: string;
  encode: (value: unknown) => unknown;
}

const plain = (value: unknown) => value ?? null;
const json = (value: unknown) => (value === null || value === undefined ? null : JSON.stringify(value));
/** Array columns travel as array literals inside the array of rows. */
const arrayLiteral = (value: unknown) =>
  Array.isArray(value)
    ? `{${value.map((v) => (typeof v === 'string' ? `"${v.replace(/["\\]/g, '\\$&')}"` : String(v))).join(',')}}`
    : null;

/** INSERT … SELECT FROM unnest of one table, its parameters counted from `first`. */
function insertOf(table: PgTable, first: number): { text: string; columns: Column[] } {
  const { name, columns } = getTableConfig(table);
  const keyOf = new Map(Object.entries(table).map(([key, column]) => [column as PgColumn, key]));
  const parts = columns
    .filter((column) => !column.hasDefault && !column.generatedIdentity)
    .map((column, i) => {
      const type = column.getSQLType();
      const isArray = type.endsWith(']');
      const isJson = type === 'jsonb';
      return {
        quoted: `"${column.name}"`,
        parameter: `$${first + i}::${isArray || isJson ? 'text' : type}[]`,
        alias: `c${i}`,
        selected: isArray || isJson ? `c${i}::${type}` : `c${i}`,
        key: keyOf.get(column) ?? column.name,
        encode: isJson ? json : isArray ? arrayLiteral : plain,
      };
    });
  const list = (pick: (part: (typeof parts)[number]) => string) => parts.map(pick).join(', ');
  const text = `insert into "${name}" (${list((p) => p.quoted)})
    select ${list((p) => p.selected)} from unnest(${list((p) => p.parameter)}) as row(${list((p) => p.alias)})`;
  return { text, columns: parts.map(({ key, encode }) => ({ key, encode })) };
}

interface Plan {
  statement: NamedStatement;
  columns: { key: string; column: Column }[];
}

/** One statement that inserts into those of the tables that have rows. */
function planOf(tables: Record<string, PgTable>, keys: readonly string[]): Plan {
  const columns: Plan['columns'] = [];
  const inserts = keys.map((key) => {
    const insert = insertOf(tables[key], columns.length + 1);
    columns.push(...insert.columns.map((column) => ({ key, column })));
    return insert.text;
  });
  const last = inserts.pop();
  const ctes = inserts.map((text, i) => `i${i} as (${text})`).join(', ');
  // PostgreSQL keeps 63 characters of a name.
  const name = `insert_${createHash('sha256').update(keys.join()).digest('hex').slice(0, 40)}`;
  return { statement: { name, text: `${ctes ? `with ${ctes} ` : ''}${last}` }, columns };
}

/**
 * Inserts any number of rows into several tables by one statement, INSERT … SELECT FROM unnest for each: several
 * times faster than lists of VALUES, one round trip, and never near the limit of 65,535 parameters. Foreign keys
 * among them hold, since they are checked when the whole statement is done. Columns with a default keep it.
 */
export function bulkInsert<T extends Record<string, PgTable>>(tables: T) {
  const plans = new Map<string, Plan>();
  return (tenant: Tenant, rows: { [K in keyof T]: readonly InferInsertModel<T[K]>[] }): Promise<unknown> => {
    const keys = Object.keys(tables).filter((key) => rows[key].length > 0);
    if (keys.length === 0) return Promise.resolve();
    const which = keys.join();
    const plan = plans.get(which) ?? planOf(tables, keys);
    plans.set(which, plan);
    const values = plan.columns.map(({ key, column }) =>
      rows[key].map((row) => column.encode((row as Record<string, unknown>)[column.key])),
    );
    return tenant.run(plan.statement, values);
  };
}
