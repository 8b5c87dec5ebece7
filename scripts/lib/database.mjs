import { DEMO, closeCluster, openCluster } from './postgres/cluster.mjs';
import { typescript } from './processes.mjs';
import { Complaint, say } from './say.mjs';
import { runForOutput } from './supervisor.mjs';

/**
 * The database of `npm start`: the one DATABASE_URL names, else the private one of this checkout, which then runs. Needs no npm package.
 * @returns {Promise<{ url: string, close(): Promise<void> }>}
 */
export async function openDatabase() {
  if (process.env.DATABASE_URL) return { url: process.env.DATABASE_URL, close: async () => {} };
  return { url: await openCluster(DEMO), close: () => closeCluster(DEMO) };
}

/** Brings the tables up to date, and fills an empty database with the line list and the demonstration. */
export async function fillDatabase(url) {
  say('bringing the tables up to date');
  await commandDatabase(url, 'migrate', 'seed');
}

/** The demonstration's accounts, one a line; '' where there are none. */
export const demoAccounts = (url) => commandDatabase(url, 'accounts');

/** Runs commands of scripts/db.ts. @returns what they printed */
async function commandDatabase(url, ...commands) {
  const env = { FOREVEIL_MODE: 'demo', ...process.env, DATABASE_URL: url };
  const args = [...typescript, 'scripts/db.ts', ...commands];
  const { status, output } = await runForOutput(process.execPath, args, { env, stdio: ['ignore', 'pipe', 2] });
  if (status !== 0) throw new Complaint('The tables could not be brought up to date; why stands above.');
  return output.trim();
}
