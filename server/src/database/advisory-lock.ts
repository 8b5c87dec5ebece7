import type { Knex } from 'knex';

/** Any number; all that changes the tables agrees on it. */
const KEY = 7_305_117;

/** Runs `work` while no other process runs its own under the same lock. The lock goes with its connection, so a killed holder leaves none. */
export async function withAdvisoryLock<T>(db: Knex, work: () => Promise<T>): Promise<T> {
  const client = db.client as { acquireConnection(): Promise<unknown>; releaseConnection(connection: unknown): Promise<void> };
  const connection = await client.acquireConnection();
  try {
    await db.raw('set lock_timeout = 0').connection(connection); // waiting for the other is the point
    await db.raw('select pg_advisory_lock(?)', [KEY]).connection(connection);
    return await work();
  } finally {
    await db.raw('select pg_advisory_unlock(?)', [KEY]).connection(connection);
    await db.raw('set lock_timeout = default').connection(connection);
    await client.releaseConnection(connection);
  }
}
