import { existsSync, mkdtempSync, writeFileSync } from 'node:fs';
import { spawnSync } from 'node:child_process';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, it } from '@jest/globals';
import { withLock } from './lock.mjs';
import { alive, identityOf } from './processes.mjs';

const lockFile = () => join(mkdtempSync(join(tmpdir(), 'lock-')), 'lock');
/** Id of a process that lived and ended. */
const deadPid = () => spawnSync(process.execPath, ['-e', '']).pid;

it('takes over a lock whose owner is dead, and leaves none behind', async () => {
  const file = lockFile();
  writeFileSync(file, `${deadPid()} 1`);
  expect(await withLock(file, () => 'done')).toBe('done');
  expect(existsSync(file)).toBe(false);
});

it('does not take the lock of a living process', async () => {
  const file = lockFile();
  writeFileSync(file, identityOf(process.ppid));
  await expect(withLock(file, () => 'done', 300)).rejects.toThrow('another process holds');
});

it('gives the lock back when the work fails', async () => {
  const file = lockFile();
  await expect(withLock(file, () => Promise.reject(new Error('no')))).rejects.toThrow('no');
  expect(existsSync(file)).toBe(false);
});

it('tells a process from a later one with the same id', () => {
  expect(alive(identityOf(process.pid))).toBe(true);
  expect(alive(`${process.pid} 1`)).toBe(process.platform !== 'linux');
  expect(alive(`${deadPid()} 1`)).toBe(false);
  expect(alive('')).toBe(false);
});
