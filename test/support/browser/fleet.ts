import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { randomBytes } from 'node:crypto';
import { createServer, type AddressInfo } from 'node:net';
import pg from 'pg';
import { repoRoot } from '../../../server/src/config/config.js';

/** The built API and a worker on a database of their own, filled with the demonstration as at the first `npm start`. */
export interface Fleet {
  readonly url: string;
  /** address of its database */
  readonly databaseUrl: string;
  /** what the processes wrote */
  readonly log: readonly string[];
  /** holds the worker still, so that a test can look at work that waits, and lets it go on */
  pauseWorker(): void;
  resumeWorker(): void;
  close(): Promise<void>;
}

/** Starts it on free ports. Needs a built server and client, and DATABASE_URL naming a server on which databases may be made. */
export async function startFleet(): Promise<Fleet> {
  const log: string[] = [];
  const database = await makeDatabase();
  const [port, mailPort] = [await freePort(), await freePort()];
  const env = { FOREVEIL_MODE: 'demo', LOG_LEVEL: 'warn', DATABASE_URL: database.url, PORT: String(port), MAIL_PORT: String(mailPort) };
  const processes: ChildProcess[] = [];
  const close = async () => {
    await Promise.all(processes.map(stop));
    await database.drop();
  };
  try {
    const filled = run(['--import', 'tsx', '--conditions=foreveil-source', 'scripts/db.ts', 'migrate', 'seed'], env, log);
    const [status] = (await once(filled, 'exit')) as [number];
    if (status !== 0) throw new Error(`the database could not be filled:\n${log.join('')}`);
    const api = run(['server/dist/main.js'], env, log);
    const worker = run(['server/dist/worker.js'], env, log);
    processes.push(api, worker);
    const url = `http://127.0.0.1:${env.PORT}`;
    await ready(url, processes, log);
    return {
      url,
      databaseUrl: database.url,
      log,
      pauseWorker: () => void worker.kill('SIGSTOP'),
      resumeWorker: () => void worker.kill('SIGCONT'),
      close,
    };
  } catch (error) {
    await close();
    throw error;
  }
}

function run(args: string[], env: Record<string, string>, log: string[]): ChildProcess {
  const child = spawn(process.execPath, args, {
    cwd: repoRoot,
    env: { ...process.env, NODE_OPTIONS: '', ...env },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (piece: Buffer) => log.push(piece.toString()));
  return child;
}

async function stop(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const ended = once(child, 'exit');
  child.kill('SIGCONT'); // one that is held still would not hear the next
  child.kill('SIGTERM');
  const force = setTimeout(() => child.kill('SIGKILL'), 10_000);
  await ended;
  clearTimeout(force);
}

async function ready(url: string, processes: readonly ChildProcess[], log: readonly string[]): Promise<void> {
  const end = Date.now() + 60_000;
  while (Date.now() < end) {
    if (processes.some((child) => child.exitCode !== null)) break;
    const answer = await fetch(`${url}/api/health/ready`).catch(() => null);
    if (answer?.ok) return;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  throw new Error(`the server did not get ready:\n${log.join('')}`);
}

async function makeDatabase() {
  const admin = process.env.DATABASE_URL;
  if (!admin) throw new Error('DATABASE_URL is missing; run the browser tests with: npm test -- browser');
  const name = `browser_${process.pid}_${randomBytes(4).toString('hex')}`;
  const sql = async (text: string) => {
    const client = new pg.Client({ connectionString: admin });
    await client.connect();
    await client.query(text);
    await client.end();
  };
  await sql(`create database ${name}`);
  const url = new URL(admin);
  url.pathname = `/${name}`;
  return { url: url.href, drop: () => sql(`drop database ${name} with (force)`) };
}

async function freePort(): Promise<number> {
  const probe = createServer().listen(0, '127.0.0.1');
  await once(probe, 'listening');
  const { port } = probe.address() as AddressInfo;
  await new Promise((resolve) => probe.close(resolve));
  return port;
}
