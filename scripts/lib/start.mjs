import { build } from './build.mjs';
import { demoAccounts, fillDatabase, openDatabase } from './database.mjs';
import { ensureDependencies } from './dependencies.mjs';
import { nextFreePort, freePort } from './ports.mjs';
import { until } from './processes.mjs';
import { Complaint, say, tell } from './say.mjs';
import { onInterruption, startChild, stopChildren } from './supervisor.mjs';

/** npm start. */
export function start() {
  const interruption = onInterruption();
  return tell(async () => {
    try {
      const wanted = await wantedPort();
      const database = await openDatabase();
      try {
        await ensureDependencies();
        await fillDatabase(database.url);
        await build();
        await serve(database.url, wanted ?? (await nextFreePort(3000)), interruption);
      } finally {
        await stopChildren();
        await database.close();
      }
      say('stopped');
    } catch (error) {
      if (!interruption.was()) throw error; // what failed only because it was interrupted is no failure
      say('stopped');
    }
  });
}

/** Runs the API and a worker until an interruption; one that ends by itself is a failure. */
async function serve(databaseUrl, port, interruption) {
  if (interruption.was()) return;
  const env = {
    NODE_ENV: 'production',
    FOREVEIL_MODE: 'demo',
    LOG_LEVEL: 'warn',
    ...process.env,
    DATABASE_URL: databaseUrl,
    PORT: String(port),
    MAIL_PORT: process.env.MAIL_PORT ?? String(await nextFreePort(port + 1025)),
  };
  const command = (file) => [process.execPath, ['--enable-source-maps', `server/dist/${file}`], { env }];
  const running = [startChild('API', ...command('main.js')), startChild('analysis worker', ...command('worker.js'))];
  const death = Promise.race(running.map(async ({ name, ended }) => ({ name, status: await ended })));

  // asked for while the rest starts; a start that is interrupted meanwhile has nobody to show them to
  const accounts = demoAccounts(databaseUrl).catch(() => '');
  const address = `http://127.0.0.1:${port}`;
  const first = await Promise.race([death, interruption.interrupted, isReady(address, interruption)]);
  if (first === 'ready') greet(address, await accounts, env);
  const end = first === 'ready' ? await Promise.race([death, interruption.interrupted]) : first;
  if (interruption.was()) return;
  if (end === null) throw new Complaint(`The API did not get ready within a minute at ${address}/api/health/ready.`);
  throw new Complaint(`The ${end.name} ended by itself (${end.status}); why stands above. Everything else was stopped.`);
}

/** The port that PORT names, null when it names none. Said to be taken before anything else is done. */
async function wantedPort() {
  if (!process.env.PORT) return null;
  const port = Number(process.env.PORT);
  if (!Number.isInteger(port) || port < 1 || port > 65535) throw new Complaint(`PORT=${process.env.PORT} is no port number.`);
  if (!(await freePort(port)))
    throw new Complaint(`Port ${port} (PORT) is taken. Choose another one, or leave PORT out to get a free one.`);
  return port;
}

/** @returns 'ready', or null when that takes longer than a minute */
function isReady(address, interruption) {
  const answers = () =>
    fetch(`${address}/api/health/ready`, { signal: AbortSignal.timeout(2_000) }).then(
      (answer) => answer.ok,
      () => false,
    );
  return until(async () => interruption.was() || ((await answers()) && 'ready'), 60_000);
}

function greet(address, accounts, { SMTP_URL }) {
  say('ready');
  const signIns = accounts && `  sign in as  ${accounts.replaceAll('\n', '\n              ')}\n`;
  const mail = SMTP_URL ? '' : `  its mail    ${address}/mail  (nothing leaves this machine)\n`;
  console.log(
    `\n  Foreveil    ${address}\n${signIns}${mail}\n  Ctrl-C stops it. The data stay in .data; deleting that folder starts anew.\n`,
  );
}
