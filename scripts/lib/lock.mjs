import { linkSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { alive, identityOf, until } from './processes.mjs';
import { Complaint } from './say.mjs';

/** Runs `work` while no other process of this machine does so under the same lock file. A lock left by a dead process is taken over. */
export async function withLock(file, work, timeoutMs = 120_000) {
  const mine = `${file}.${process.pid}`;
  writeFileSync(mine, identityOf(process.pid));
  try {
    if (!(await until(() => take(mine, file), timeoutMs, 200))) throw new Complaint(`another process holds ${file}: ${owner(file)}`);
    try {
      return await work();
    } finally {
      rmSync(file, { force: true });
    }
  } finally {
    rmSync(mine, { force: true });
  }
}

/** A hard link appears with its content or not at all, so nobody sees a lock without its owner. */
function take(mine, file) {
  try {
    linkSync(mine, file);
    return true;
  } catch (error) {
    if (error.code !== 'EEXIST') throw error;
    if (!alive(owner(file))) rmSync(file, { force: true });
    return false;
  }
}

function owner(file) {
  try {
    return readFileSync(file, 'utf8');
  } catch {
    return '';
  }
}
