import { spawnSync } from 'node:child_process';
import { chownSync, readFileSync } from 'node:fs';
import { isRoot } from '../debian.mjs';
import { Complaint } from '../say.mjs';

/**
 * Runs a program as the account that owns the database. The server refuses to run as root, so root runs everything as Debian's "postgres"
 * account; anybody else runs it as themselves.
 * @returns what spawnSync returns
 */
export function asDatabaseAccount(command, args, { env = {}, ...options } = {}) {
  const plain = { PATH: process.env.PATH, LANG: 'C.UTF-8', LC_ALL: 'C.UTF-8', TZ: 'UTC', ...env };
  const [program, ...all] = [...(isRoot ? ['setpriv', '--reuid=postgres', '--regid=postgres', '--init-groups'] : []), command, ...args];
  return spawnSync(program, all, { encoding: 'utf8', cwd: '/', env: plain, ...options });
}

/** The same, for programs that have to succeed. @returns what it wrote to standard output */
export function demand(command, args, options) {
  const result = asDatabaseAccount(command, args, options);
  if (result.error) throw result.error;
  if (result.status !== 0) {
    const said = String(result.stderr || result.stdout || '').trim();
    throw new Complaint(`${command} failed (${result.signal ?? result.status}): ${said}`);
  }
  return String(result.stdout ?? '').trim();
}

/** Hands a file or folder to the account that owns the database. */
export function giveToDatabaseAccount(path) {
  if (!isRoot) return;
  const line = readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .find((entry) => entry.startsWith('postgres:'));
  if (!line)
    throw new Complaint('This machine has PostgreSQL but no "postgres" account to run it as. Run the command as an ordinary user.');
  const [, , uid, gid] = line.split(':').map(Number);
  chownSync(path, uid, gid);
}
