import { mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { dataDir } from '../paths.mjs';
import { alive, identityOf } from '../processes.mjs';

// Two runs from one checkout share a cluster; the one that ends first must not take it from the other.

const folderOf = (name) => join(dataDir, `${name}.users`);

export function addUser(name) {
  mkdirSync(folderOf(name), { recursive: true });
  writeFileSync(join(folderOf(name), String(process.pid)), identityOf(process.pid));
}

export function dropUser(name) {
  rmSync(join(folderOf(name), String(process.pid)), { force: true });
}

/** Living processes that use the cluster; forgets the dead ones. */
export function otherUsers(name) {
  mkdirSync(folderOf(name), { recursive: true });
  const living = readdirSync(folderOf(name)).filter((pid) => {
    const file = join(folderOf(name), pid);
    if (alive(readFileSync(file, 'utf8'))) return true;
    rmSync(file, { force: true });
    return false;
  });
  return living.length;
}
