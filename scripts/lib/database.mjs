import { DEMO, closeCluster, openCluster } from './postgres/cluster.mjs';
import { typescript } from './processes.mjs';
import { Complaint, say } from './say.mjs';
import { runTracked } from './supervisor.mjs';

/**
 * The database of `npm start`, its tables up to date: the one DATABASE_URL names, else the private one of this checkout.
 * @returns {Promise<{ url: string, close(): Promise<void> }>}
 */
export async function openDatabase() {
  const given = process.env.DATABASE_URL;
  const url = given ?? (await openCluster(DEMO));
  const close = async () => {
    if (!given) await closeCluster(DEMO);
  };
  try {
    await prepareTables(url);
    return { url, close };
  } catch (error) {
    await close();
    throw error;
  }
}

/** Migrates, and fills an empty database with the line lists and the demonstration. */
async function prepareTables(url) {
  say('bringing the tables up to date');
  const env = { FOREVEIL_MODE: 'demo', ...process.env, DATABASE_URL: url };
  const status = await runTracked(process.execPath, [...typescript, 'scripts/db.ts', 'migrate', 'seed-if-empty'], {
    env,
    stdio: ['ignore', 2, 2],
  });
  if (status !== 0) throw new Complaint('The tables could not be brought up to date; why stands above.');
}
