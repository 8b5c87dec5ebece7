import { build } from './build.mjs';
import { fillDatabase, openDatabase } from './database.mjs';
import { ensureDependencies } from './dependencies.mjs';
import { nextFreePort } from './ports.mjs';
import { Complaint, say, tell } from './say.mjs';
import { onInterruption, startChild, stopChildren } from './supervisor.mjs';

const node = process.execPath;
const watched = ['--watch-path=server/dist', '--watch-path=shared/dist', '--watch-preserve-output', '--enable-source-maps'];

/** npm run dev. */
export function dev() {
  const interruption = onInterruption();
  return tell(async () => {
    const database = await openDatabase();
    try {
      await ensureDependencies();
      await fillDatabase(database.url);
      await build(['server']);
      await watch(database.url, interruption);
    } finally {
      await stopChildren();
      await database.close();
    }
  });
}

/** Runs compiler, API, worker and Vite until an interruption or until one of them gives up. */
async function watch(databaseUrl, interruption) {
  if (interruption.was()) return;
  const apiPort = await nextFreePort(3000);
  const env = {
    FOREVEIL_MODE: 'demo',
    ...process.env,
    DATABASE_URL: databaseUrl,
    PORT: String(apiPort),
    API_PORT: String(apiPort),
    MAIL_PORT: String(await nextFreePort(apiPort + 1025)),
  };
  const running = [
    startChild('compiler', node, ['node_modules/typescript/bin/tsc', '-b', 'server', '--watch', '--preserveWatchOutput'], { env }),
    startChild('API', node, [...watched, 'server/dist/main.js'], { env }),
    startChild('analysis worker', node, [...watched, 'server/dist/worker.js'], { env }),
    startChild('Vite', node, ['node_modules/vite/bin/vite.js', 'client'], { env }),
  ];
  say('ready when Vite says so; Ctrl-C stops everything');
  const death = Promise.race(running.map(async ({ name, ended }) => ({ name, status: await ended })));
  const end = await Promise.race([death, interruption.interrupted]);
  if (!interruption.was()) throw new Complaint(`The ${end.name} ended by itself (${end.status}).`);
}
