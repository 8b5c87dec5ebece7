import { spawn, spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { root } from './paths.mjs';
import { Complaint } from './say.mjs';

/** Runs a program to its end. Throws when it cannot start or exits with another status than 0. */
export function run(command, args, { what = command, ...options } = {}) {
  const result = spawnSync(command, args, { cwd: root, stdio: 'inherit', encoding: 'utf8', ...options });
  if (result.error) throw new Complaint(`${what}: ${result.error.message}`);
  if (result.status !== 0) {
    const said = [result.stderr, result.stdout].filter((text) => typeof text === 'string' && text.trim()).join('\n');
    throw new Complaint(`${what} failed (${result.signal ?? `exit status ${result.status}`})${said ? `:\n${said.trim()}` : ''}`);
  }
  return result;
}

/** Runs a program to its end without blocking the event loop. Resolves to its exit status, 1 when a signal ended it or it could not start. */
export function runAsync(command, args, options = {}) {
  return new Promise((resolve) => {
    const child = spawn(command, args, { cwd: root, stdio: 'inherit', ...options });
    child.once('error', () => resolve(1));
    child.once('exit', (status) => resolve(status ?? 1));
  });
}

/** Arguments for Node that let it run a TypeScript script of this repository against the sources. */
export const typescript = ['--import', 'tsx', '--conditions=foreveil-source'];

/**
 * Names a process for good: its id with its start time, so that another process that later gets the same id is not taken for it.
 * Null when no such process lives (a zombie does not).
 */
export function identityOf(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' '); // from field 3, the state, on; see proc(5)
    return fields[0] === 'Z' ? null : `${pid} ${fields[19]}`;
  } catch {
    return process.platform === 'linux' ? null : identityBySignal(pid);
  }
}

/** Where there is no /proc: the bare id of a process that takes signals. */
function identityBySignal(pid) {
  try {
    process.kill(pid, 0);
    return `${pid} -`;
  } catch {
    return null;
  }
}

/** Whether the process that `identityOf` named still lives. */
export const alive = (identity) => Boolean(identity) && identityOf(Number.parseInt(identity, 10)) === identity;

export const pause = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

/** The same, as a bound on something else: does not keep the process alive. */
export const bound = (ms) => new Promise((resolve) => setTimeout(resolve, ms).unref());

/** Asks until the answer is truthy; null after `timeoutMs`. */
export async function until(ask, timeoutMs, everyMs = 100) {
  const end = Date.now() + timeoutMs;
  for (;;) {
    const answer = await ask();
    if (answer) return answer;
    if (Date.now() > end) return null;
    await pause(everyMs);
  }
}
