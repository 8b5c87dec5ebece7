import { DEMO, closeCluster, openCluster } from './postgres/cluster.mjs';
import { typescript } from './processes.mjs';
import { Complaint, say } from './say.mjs';
import { runForOutput } from './supervisor.mjs';

/**
 * The database of `npm start`, its tables up to date: the one DATABASE_URL names, else the private one of this checkout.
 * @returns {Promise<{ url: string, accounts: Promise<string>, close(): Promise<void> }>} `accounts`: the demonstration's, one a line; '' without it
 */
export async function openDatabase() {
  const given = process.env.DATABASE_URL;
  const url = given ?? (await openCluster(DEMO));
  const close = async () => {
    if (!given) await closeCluster(DEMO);
  };
  try {
    say('bringing the tables up to date');
    await commandDatabase(url, 'migrate', 'seed');
    // asked for while the rest starts; a start that is interrupted meanwhile has nobody to show them to
    const accounts = commandDatabase(url, 'accounts').catch(() => '');
    return { url, accounts, close };
  } catch (error) {
    await close();
    throw error;
  }
}

/** Runs commands of scripts/db.ts. @returns what they printed */
async function commandDatabase(url, ...commands) {
  const env = { FOREVEIL_MODE: 'demo', ...process.env, DATABASE_URL: url };
  const args = [...typescript, 'scripts/db.ts', ...commands];
  const { status, output } = await runForOutput(process.execPath, args, { env, stdio: ['ignore', 'pipe', 2] });
  if (status !== 0) throw new Complaint('The tables could not be brought up to date; why stands above.');
  return output.trim();
}
