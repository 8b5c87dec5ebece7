import type { Knex } from 'knex';

export type Trx = Knex.Transaction;

/** Two transactions that got in each other's way: PostgreSQL ended this one so that it can be tried again. */
const TRY_AGAIN = new Set(['40001', '40P01']);

/** Runs `work` in one transaction, and runs all of it again (three times at most) when the database asks for that. */
export async function inTransaction<T>(db: Knex, work: (trx: Trx) => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await db.transaction(work);
    } catch (error) {
      if (attempt >= 3 || !TRY_AGAIN.has((error as { code?: string }).code ?? '')) throw error;
      await new Promise((resolve) => setTimeout(resolve, attempt * 20 * (1 + Math.random())));
    }
  }
}
