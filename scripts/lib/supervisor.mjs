import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { root } from './paths.mjs';
import { bound } from './processes.mjs';

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

/** Runs a program to its end and keeps what it writes. Standard error is kept too unless `options.stdio` sends it elsewhere. */
export async function runForOutput(command, args, options) {
  const child = startChild(command, command, args, { stdio: ['ignore', 'pipe', 'pipe'], ...options });
  const streams = [child.process.stdout, child.process.stderr].filter(Boolean);
  const pieces = [];
  for (const stream of streams) stream.on('data', (piece) => pieces.push(piece));
  const drained = Promise.all(streams.map((stream) => once(stream, 'close')));
  const status = await child.ended;
  await Promise.race([drained, bound(2_000)]); // something it started may hold its pipes open for ever
  return { status: typeof status === 'number' ? status : 1, output: Buffer.concat(pieces).toString('utf8') };
}

/** Ends all children and waits for them: politely first, after `patienceMs` by force. */
export async function stopChildren(patienceMs = 15_000) {
  const all = [...children];
  for (const child of all) signalGroup(child, 'SIGTERM');
  const quiet = Promise.all(all.map((child) => child.ended));
  await Promise.race([quiet, bound(patienceMs)]);
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
 * From now on a Ctrl-C or SIGTERM resolves `interrupted` and ends the children, a second one ends them by force, a third one this process.
 * @returns {{ interrupted: Promise<string>, was: () => boolean }}
 */
export function onInterruption() {
  let signals = 0;
  const interrupted = Promise.race(SIGNALS.map((signal) => once(process, signal).then(() => signal)));
  const answer = () => {
    signals++;
    if (signals === 1) void stopChildren();
    if (signals === 2) for (const child of children) signalGroup(child, 'SIGKILL');
    if (signals === 3) process.exit(1);
  };
  for (const signal of SIGNALS) process.on(signal, answer);
  return { interrupted, was: () => signals > 0 };
}
