import { createHash } from 'node:crypto';
import type { InferInsertModel } from 'drizzle-orm';
import { getTableConfig, type PgColumn, type PgTable } from 'drizzle-orm/pg-core';
import type { NamedStatement, Tenant } from './tenant';

type Row = Record<string, unknown>;

interface Column {
  name: string;
  key: string;
  type: string;
}

/** The columns that are written: those with a default keep it. */
function writtenColumns(table: PgTable): Column[] {
  const keyOf = new Map(Object.entries(table).map(([key, column]) => [column as PgColumn, key]));
  return getTableConfig(table)
    .columns.filter((column) => !column.hasDefault && !column.generatedIdentity)
    .map((column) => ({
      name: `"${column.name}"`,
      key: keyOf.get(column) ?? column.name,
      type: column.getSQLType(),
    }));
}

interface Insert {
  text: string;
  /** One parameter a column. */
  parameters: (rows: readonly Row[]) => unknown[];
}

const isArray = ({ type }: Column) => type.endsWith(']');
const isJson = ({ type }: Column) => type === 'jsonb' || type === 'json';

const SPECIAL = /["\\]/g;

/** One element of an array literal. */
function element(value: unknown): string {
  if (value === null || value === undefined) return 'NULL';
  if (typeof value === 'number' || typeof value === 'boolean') return String(value);
  if (Array.isArray(value)) return `"${literal(value).replace(SPECIAL, '\\$&')}"`;
  const text = Buffer.isBuffer(value) ? `\\x${value.toString('hex')}` : String(value);
  return `"${text.replace(SPECIAL, '\\$&')}"`;
}

/** An array as PostgreSQL reads it: the driver's own way takes several times as long. */
function literal(values: readonly unknown[]): string {
  let text = '{';
  for (let i = 0; i < values.length; i++) text += i === 0 ? element(values[i]) : `,${element(values[i])}`;
  return `${text}}`;
}

/** A single row as VALUES of plain parameters: cheaper to send and to read than arrays of one. */
function insertOne(table: PgTable, first: number): Insert {
  const columns = writtenColumns(table);
  const text = `insert into "${getTableConfig(table).name}" (${columns.map((c) => c.name).join(', ')})
    values (${columns.map((c, i) => `$${first + i}::${c.type}`).join(', ')})`;
  const encode = (column: Column, value: unknown) => {
    if (value === null || value === undefined) return null;
    if (isJson(column)) return JSON.stringify(value);
    return Array.isArray(value) ? literal(value) : value;
  };
  return { text, parameters: ([row]) => columns.map((column) => encode(column, row[column.key])) };
}

/** Any number of rows as SELECT FROM unnest, an array a column; those of JSON as one JSON array each. */
function insertMany(table: PgTable, first: number): Insert {
  const columns = writtenColumns(table);
  const place = (column: Column) => `$${first + columns.indexOf(column)}`;
  const plain = columns.filter((column) => !isJson(column));
  // As elements of a text array each would be escaped, character by character.
  const documents = columns.filter(isJson);
  const arrays = plain.map((c) => `${place(c)}::${isArray(c) ? 'text' : c.type}[]`);
  const sources = [
    `unnest(${arrays.join(', ')})`,
    ...documents.map((c) => `${c.type}_array_elements(${place(c)}::${c.type})`),
  ];
  const aliases = [...plain, ...documents].map((column) => `c${columns.indexOf(column)}`);
  const selected = columns.map((column, i) => {
    if (isArray(column)) return `c${i}::${column.type}`;
    // JSON null is SQL null in a column that may be null; text JSON never is.
    return column.type === 'jsonb' ? `nullif(c${i}, 'null')` : `c${i}`;
  });
  const text = `insert into "${getTableConfig(table).name}" (${columns.map((c) => c.name).join(', ')})
    select ${selected.join(', ')} from rows from (${sources.join(', ')}) as row(${aliases.join(', ')})`;
  const encode = (column: Column, rows: readonly Row[]) => {
    const values = rows.map((row) => row[column.key] ?? null);
    return isJson(column) ? JSON.stringify(values) : literal(values);
  };
  return { text, parameters: (rows) => columns.map((column) => encode(column, rows)) };
}

interface Plan {
  statement: NamedStatement;
  inserts: { key: string; insert: Insert }[];
}

/** One statement that inserts into those of the tables that have rows. */
function planOf(tables: Record<string, PgTable>, parts: readonly { key: string; single: boolean }[]): Plan {
  let first = 1;
  const inserts = parts.map(({ key, single }) => {
    const insert = (single ? insertOne : insertMany)(tables[key], first);
    first += writtenColumns(tables[key]).length;
    return { key, insert };
  });
  const texts = inserts.map(({ insert }) => insert.text);
  const last = texts.pop();
  const ctes = texts.map((text, i) => `i${i} as (${text})`).join(', ');
  const text = `${ctes ? `with ${ctes} ` : ''}${last}`;
  return {
    statement: { name: `insert_${createHash('sha256').update(text).digest('hex').slice(0, 40)}`, text },
    inserts,
  };
}

/**
 * Inserts rows into several tables by one statement and one round trip: several times faster than drizzle's lists of
 * VALUES, and never near the limit of 65,535 parameters. Foreign keys among the tables hold, since they are checked
 * when the whole statement is done.
 */
export function bulkInsert<T extends Record<string, PgTable>>(tables: T) {
  const plans = new Map<string, Plan>();
  return (tenant: Tenant, rows: { [K in keyof T]: readonly InferInsertModel<T[K]>[] }): Promise<unknown> => {
    const parts = Object.keys(tables)
      .filter((key) => rows[key].length > 0)
      .map((key) => ({ key, single: rows[key].length === 1 }));
    if (parts.length === 0) return Promise.resolve();
    const which = parts.map(({ key, single }) => (single ? key : `${key}*`)).join();
    const plan = plans.get(which) ?? planOf(tables, parts);
    plans.set(which, plan);
    const values = plan.inserts.flatMap(({ key, insert }) => insert.parameters(rows[key] as readonly Row[]));
    return tenant.run(plan.statement, values);
  };
}
