import { TEST, openCluster } from '../../scripts/lib/postgres/cluster.mjs';

/** Before API and browser tests: a private PostgreSQL, whose address the tests find in DATABASE_URL. They make databases of their own in it. */
export default async function up() {
  if (process.env.DATABASE_URL) return;
  process.env.DATABASE_URL = await openCluster(TEST);
  globalThis.openedCluster = TEST;
}
