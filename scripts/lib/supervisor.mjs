import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { root } from './paths.mjs';
import { pause } from './processes.mjs';
import { say } from './say.mjs';

// Every child gets a process group of its own: a Ctrl-C in the terminal then reaches this process only, which ends them in the right order,
// and a whole group can be ended when its first process is gone already.

/** @typedef {{ name: string, process: import('node:child_process').ChildProcess, ended: Promise<number | string> }} Child */

/** @type {Set<Child>} */
const children = new Set();

/** @returns {Child} `ended` resolves to the exit status, or the name of the signal that ended it */
export function startChild(name, command, args, options = {}) {
  const child = spawn(command, args, { cwd: root, stdio: ['ignore', 'inherit', 'inherit'], ...options, detached: true });
  const ended = new Promise((resolve) => {
    child.once('error', (error) => resolve(error.message));
    child.once('exit', (status, signal) => resolve(status ?? signal));
  });
  const entry = { name, process: child, ended };
  children.add(entry);
  void ended.then(() => children.delete(entry));
  return entry;
}

/** Runs a program to its end as a child that an interruption ends too. @returns its exit status; 1 when it ended otherwise */
export async function runTracked(command, args, options) {
  const status = await startChild(command, command, args, options).ended;
  return typeof status === 'number' ? status : 1;
}

/** Ends all children and waits for them: politely first, after `patienceMs` by force. */
export async function stopChildren(patienceMs = 15_000) {
  const all = [...children];
  for (const child of all) signalGroup(child, 'SIGTERM');
  const quiet = Promise.all(all.map((child) => child.ended));
  await Promise.race([quiet, pause(patienceMs)]);
  for (const child of all) signalGroup(child, 'SIGKILL'); // also what a child that ended left behind in its group
  await quiet;
}

function signalGroup({ process: child }, signal) {
  try {
    if (child.pid) process.kill(-child.pid, signal);
  } catch (error) {
    if (error.code !== 'ESRCH') throw error;
  }
}

const SIGNALS = ['SIGINT', 'SIGTERM', 'SIGHUP'];

/**
 * From now on the first Ctrl-C or SIGTERM resolves `interrupted` and ends the children, and a second one ends everything at once.
 * @returns {{ interrupted: Promise<string>, was: () => boolean }}
 */
export function onInterruption() {
  let signals = 0;
  const interrupted = Promise.race(SIGNALS.map((signal) => once(process, signal).then(() => signal)));
  for (const signal of SIGNALS) {
    process.on(signal, () => {
      signals++;
      if (signals === 1) void stopChildren();
      else {
        for (const child of children) signalGroup(child, 'SIGKILL');
        say('stopped by force');
        process.exit(1);
      }
    });
  }
  return { interrupted, was: () => signals > 0 };
}
