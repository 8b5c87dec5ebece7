import { randomBytes } from 'node:crypto';
import { chmodSync, existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { withLock } from '../lock.mjs';
import { dataFile, root } from '../paths.mjs';
import { freePort } from '../ports.mjs';
import { Complaint, say } from '../say.mjs';
import { asDatabaseAccount, demand, giveToDatabaseAccount } from './account.mjs';
import { chooseHome, recall, remember, stateFile, urlOf } from './home.mjs';
import { clearStalePid, serverRuns } from './postmaster.mjs';
import { serverPrograms } from './programs.mjs';
import { addUser, dropUser, otherUsers } from './users.mjs';

/** The cluster of `npm start`, and the one of the tests, which never touches a person's data and does not wait for the disk. */
export const DEMO = 'pg';
export const TEST = 'pg-test';

/**
 * Makes sure the cluster runs, on loopback only, and counts this process as one of its users.
 * @returns the address of its database
 */
export async function openCluster(name) {
  return withLock(dataFile(`${name}.lock`), async () => {
    const cluster = await started(name);
    addUser(name);
    return urlOf(cluster);
  });
}

/** Stops the cluster unless another living process counts as its user. */
export async function closeCluster(name) {
  await withLock(dataFile(`${name}.lock`), () => {
    dropUser(name);
    if (otherUsers(name) === 0) stop(name);
  });
}

/** Stops the cluster, whoever uses it. @returns whether it ran */
export function stop(name) {
  const cluster = recall(name);
  if (!cluster || !serverRuns(dataOf(cluster))) return false;
  demand(programOf(cluster, 'pg_ctl'), ['stop', '-m', 'fast', '-w', '-D', dataOf(cluster)]);
  return true;
}

/** Stops the cluster and deletes all its data. */
export function reset(name) {
  stop(name);
  rmSync(recall(name)?.home ?? chooseHome(name), { recursive: true, force: true });
  rmSync(stateFile(name), { force: true });
}

/** The cluster when it runs, else null. */
export function running(name) {
  const cluster = recall(name);
  return cluster && serverRuns(dataOf(cluster)) ? cluster : null;
}

/** Runs SQL as the owner of the cluster. @returns rows of tab-free text */
export function query(cluster, sql, database = 'postgres') {
  const options = ['-X', '-q', '-A', '-t', '-v', 'ON_ERROR_STOP=1'];
  const where = ['-h', '127.0.0.1', '-p', String(cluster.port), '-U', 'foreveil', '-d', database];
  return demand(programOf(cluster, 'psql'), [...options, ...where, '-c', sql], { env: { PGPASSWORD: cluster.password } }).split('\n');
}

async function started(name) {
  const cluster = recall(name) ?? create(name);
  if (!serverRuns(dataOf(cluster))) await boot(cluster);
  if (!query(cluster, 'select datname from pg_database').includes('foreveil')) query(cluster, 'create database foreveil');
  return cluster;
}

/** Makes the files of a new cluster. */
function create(name) {
  const bin = serverPrograms();
  const home = chooseHome(name);
  const cluster = { name, root, home, port: 0, password: randomBytes(18).toString('base64url'), fast: name === TEST };
  if (existsSync(join(home, 'data', 'PG_VERSION'))) {
    throw new Complaint(`${home} holds a database, but ${stateFile(name)}, which holds its password, is gone.
Put that file back, or delete the data: npm run pg -- reset`);
  }
  say(`making a private PostgreSQL database in ${home}`);
  rmSync(home, { recursive: true, force: true });
  mkdirSync(home, { recursive: true, mode: 0o700 });
  giveToDatabaseAccount(home);
  initialise(bin, cluster);
  remember(cluster);
  return cluster;
}

function initialise(bin, cluster) {
  const passwordFile = join(cluster.home, 'password'); // initdb cannot read it from a Node child's standard input, which is a socket
  writeFileSync(passwordFile, `${cluster.password}\n`, { mode: 0o600 });
  giveToDatabaseAccount(passwordFile);
  const access = ['-U', 'foreveil', `--pwfile=${passwordFile}`, '-A', 'scram-sha-256'];
  try {
    demand(join(bin, 'initdb'), ['-D', dataOf(cluster), ...access, '-E', 'UTF8', '--locale=C.UTF-8', '--no-instructions']);
  } finally {
    rmSync(passwordFile, { force: true });
  }
}

/** Starts the server on its former port when that is still free, else on another one. */
async function boot(cluster) {
  chmodSync(cluster.home, 0o700);
  await clearStalePid(dataOf(cluster));
  for (let attempt = 1; ; attempt++) {
    const former = attempt === 1 ? Number(process.env.PGPORT) || cluster.port : 0;
    cluster.port = (await freePort(former)) ?? (await freePort());
    remember(cluster);
    const log = join(cluster.home, 'server.log');
    const args = ['start', '-w', '-t', '60', '-D', dataOf(cluster), '-l', log, '-o', serverOptions(cluster)];
    const result = asDatabaseAccount(programOf(cluster, 'pg_ctl'), args, { stdio: ['ignore', 'ignore', 'pipe'] });
    if (result.status === 0) return;
    if (attempt === 3) throw new Complaint(`PostgreSQL did not start: ${result.stderr.trim()}\n${lastLines(log)}`);
  }
}

function serverOptions(cluster) {
  const options = [
    `-p ${cluster.port}`,
    '-h 127.0.0.1',
    '-c unix_socket_directories=',
    '-c timezone=UTC',
    '-c log_timezone=UTC',
    '-c max_connections=80',
  ];
  const careless = ['-c fsync=off', '-c synchronous_commit=off', '-c full_page_writes=off'];
  return [...options, ...(cluster.fast ? careless : [])].join(' ');
}

function lastLines(file) {
  try {
    return readFileSync(file, 'utf8').trim().split('\n').slice(-8).join('\n');
  } catch {
    return `see ${file}`;
  }
}

const dataOf = (cluster) => join(cluster.home, 'data');
const majorOf = (cluster) => Number(readFileSync(join(dataOf(cluster), 'PG_VERSION'), 'utf8'));
const programOf = (cluster, program) => join(serverPrograms(majorOf(cluster)), program);
