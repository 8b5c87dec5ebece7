import { spawnSync } from 'node:child_process';
import { readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { identityOf, until } from '../processes.mjs';

/**
 * Whether a server runs on this data directory. The id in its pid file is not enough: after a crash, a restart of the machine or a copied
 * folder the id may belong to nobody, to a zombie or to another program.
 */
export function serverRuns(data) {
  const pid = recordedPid(data);
  return pid !== null && identityOf(pid) !== null && commandLine(pid).includes(data);
}

/**
 * Removes a pid file whose id now belongs to another program; PostgreSQL would take that for a running server and refuse to start. Where
 * nobody has the id, it sees so itself, and looks first for processes that the dead server left behind.
 */
export async function clearStalePid(data) {
  const pid = recordedPid(data);
  if (pid === null || serverRuns(data)) return;
  await until(() => !isZombie(pid), 10_000); // where process 1 is slow a killed server stays one for seconds, and pg_ctl would believe it runs
  if (identityOf(pid) !== null) rmSync(join(data, 'postmaster.pid'), { force: true });
}

function isZombie(pid) {
  try {
    return readFileSync(`/proc/${pid}/stat`, 'utf8').includes(') Z ');
  } catch {
    return false;
  }
}

function recordedPid(data) {
  try {
    return Number(readFileSync(join(data, 'postmaster.pid'), 'utf8').split('\n')[0]) || null;
  } catch {
    return null;
  }
}

function commandLine(pid) {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ');
  } catch {
    return spawnSync('ps', ['-o', 'command=', '-p', String(pid)], { encoding: 'utf8' }).stdout ?? '';
  }
}
