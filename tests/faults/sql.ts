import pg from 'pg';

export type Sql = Awaited<ReturnType<typeof openSql>>;

/** A connection past all row security that is kept, so that asking again and again costs little. */
export async function openSql(superuserUrl: string) {
  const client = new pg.Client({ connectionString: superuserUrl });
  // The test may take the server away.
  client.on('error', () => undefined);
  await client.connect();
  return {
    run: async <R extends object>(text: string, values: unknown[] = []) =>
      (await client.query(text, values)).rows as R[],
    close: () => client.end(),
  };
}
