import { join } from 'node:path';
import knexModule, { type Knex } from 'knex';
import { repoRoot } from '../config/config.js';

export type { Knex } from 'knex';
export const KNEX = Symbol('knex');

interface Limits {
  readonly pool?: number;
  /** longest time a statement may take */
  readonly statementSeconds?: number;
  readonly applicationName?: string;
}

const ignore = () => undefined;
/** Everything that knex would print reaches its caller as an error too. */
const SILENT: Knex.Logger = { warn: ignore, error: ignore, debug: ignore, deprecate: ignore };

/** A connection pool; every connection carries its limits, so a runaway statement or a forgotten transaction ends by itself. */
export function createKnex(url: string, { pool = 10, statementSeconds = 30, applicationName = 'foreveil' }: Limits = {}): Knex {
  return knexModule({
    client: 'pg',
    connection: {
      connectionString: url,
      application_name: applicationName,
      statement_timeout: statementSeconds * 1000,
      lock_timeout: 5_000,
      idle_in_transaction_session_timeout: 30_000,
      connectionTimeoutMillis: 3_000,
    } as Knex.PgConnectionConfig, // knex does not know the two last limits by name, pg does
    pool: { min: 0, max: pool },
    acquireConnectionTimeout: 3_000,
    log: SILENT,
    migrations: { directory: join(repoRoot, 'migrations'), extension: 'ts', loadExtensions: ['.ts'] },
  });
}
