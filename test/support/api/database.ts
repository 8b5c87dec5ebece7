import { execFile } from 'node:child_process';
import { createHash, randomBytes } from 'node:crypto';
import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { promisify } from 'node:util';
import pg from 'pg';
import { repoRoot } from '../../../server/src/config/config.js';

export interface TestDatabase {
  readonly url: string;
  drop(): Promise<void>;
}

const TEMPLATE = 'api_template_';
/** one maker of the template at a time, whichever Jest worker it is */
const LOCK = 90_210;

/** A database with all tables and the default line list, copied from a template in about a tenth of a second. */
export async function makeDatabase(): Promise<TestDatabase> {
  const template = await ensureTemplate();
  return create(`api_${process.pid}_${randomBytes(4).toString('hex')}`, `template ${template}`);
}

/** A database with nothing in it. */
export const makeEmptyDatabase = (): Promise<TestDatabase> => create(`api_${process.pid}_${randomBytes(4).toString('hex')}`, '');

/** Runs scripts/db.ts on a database, as a person would. @returns what it printed */
export async function db(url: string, ...commands: string[]): Promise<string> {
  const args = ['--import', 'tsx', '--conditions=foreveil-source', 'scripts/db.ts', ...commands];
  const env = { ...process.env, NODE_OPTIONS: '', NODE_ENV: 'test', DATABASE_URL: url };
  const { stdout } = await promisify(execFile)(process.execPath, args, { cwd: repoRoot, env });
  return stdout;
}

async function create(name: string, how: string): Promise<TestDatabase> {
  await admin((client) => client.query(`create database ${name} ${how}`));
  return { url: urlOf(name), drop: () => admin((client) => client.query(`drop database if exists ${name} with (force)`)) };
}

/** The template for the migrations and lists as they are now; templates of earlier versions go. */
async function ensureTemplate(): Promise<string> {
  const name = `${TEMPLATE}${digest()}`;
  await admin(async (client) => {
    await client.query('select pg_advisory_lock($1)', [LOCK]);
    const { rows } = await client.query<{ datname: string }>('select datname from pg_database where datname like $1', [`${TEMPLATE}%`]);
    const have = rows.map(({ datname }) => datname);
    if (have.includes(name)) return;
    for (const old of have) await client.query(`drop database if exists ${old} with (force)`);
    await client.query(`drop database if exists ${TEMPLATE}making with (force)`);
    await client.query(`create database ${TEMPLATE}making`);
    await db(urlOf(`${TEMPLATE}making`), 'migrate', 'line-list');
    await client.query(`alter database ${TEMPLATE}making rename to ${name}`);
  });
  return name;
}

function digest(): string {
  const hash = createHash('sha256');
  const files = ['migrations', 'seeds', 'seeds/data', 'shared/src/linelist'].flatMap((folder) =>
    readdirSync(join(repoRoot, folder), { withFileTypes: true })
      .filter((entry) => entry.isFile())
      .map((entry) => join(repoRoot, folder, entry.name)),
  );
  for (const file of files.sort()) hash.update(file).update(readFileSync(file));
  return hash.digest('hex').slice(0, 12);
}

async function admin(work: (client: pg.Client) => Promise<unknown>): Promise<void> {
  const client = new pg.Client({ connectionString: adminUrl() });
  await client.connect();
  try {
    await work(client);
  } finally {
    await client.end();
  }
}

function adminUrl(): string {
  if (!process.env.DATABASE_URL) throw new Error('DATABASE_URL is missing; run the API tests with: npm test -- api');
  return process.env.DATABASE_URL;
}

function urlOf(name: string): string {
  const url = new URL(adminUrl());
  url.pathname = `/${name}`;
  return url.href;
}
