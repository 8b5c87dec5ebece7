import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, it } from '@jest/globals';
import { clearStalePid, serverRuns } from './postmaster.mjs';

/** A data folder whose pid file names a process. */
function dataNaming(pid) {
  const data = mkdtempSync(join(tmpdir(), 'data-'));
  writeFileSync(join(data, 'postmaster.pid'), `${pid}\n${data}\n`);
  return data;
}
const hasPidFile = (data) => existsSync(join(data, 'postmaster.pid'));

it('takes no other program for a running server, and removes the pid file that names it', async () => {
  const data = dataNaming(process.pid);
  expect(serverRuns(data)).toBe(false);
  await clearStalePid(data);
  expect(hasPidFile(data)).toBe(false);
});

it('leaves the pid file of a dead server to PostgreSQL, which then looks for what the server left behind', async () => {
  const data = dataNaming(spawnSync(process.execPath, ['-e', '']).pid);
  expect(serverRuns(data)).toBe(false);
  await clearStalePid(data);
  expect(hasPidFile(data)).toBe(true);
});

it('is not running where no server ever was', () => {
  expect(serverRuns(mkdtempSync(join(tmpdir(), 'data-')))).toBe(false);
});
