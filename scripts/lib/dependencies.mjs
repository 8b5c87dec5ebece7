import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { withLock } from './lock.mjs';
import { dataFile, root } from './paths.mjs';
import { Complaint, say } from './say.mjs';
import { runTracked } from './supervisor.mjs';

/** Installs the npm packages of package-lock.json unless exactly these are there. */
export async function ensureDependencies() {
  await withLock(
    dataFile('npm.lock'),
    async () => {
      if (missingPackages() === 0) return;
      say('installing the npm packages (npm ci)');
      const status = await runTracked('npm', ['ci', '--include=dev', '--no-fund', '--no-audit', '--loglevel=error'], {
        stdio: ['ignore', 2, 2],
      });
      if (status !== 0) throw new Complaint('npm ci failed; what it said stands above. Is the package registry within reach?');
      if (missingPackages() > 0) throw new Complaint('npm ci ended well but left packages out: delete node_modules and try again');
    },
    600_000,
  );
}

/** How many packages of the lock file are not installed, or in another version. npm keeps a list of what it installed, written last. */
function missingPackages() {
  const locked = packagesIn(join(root, 'package-lock.json'));
  const installed = packagesIn(join(root, 'node_modules', '.package-lock.json'));
  const needed = Object.entries(locked).filter(([path, entry]) => path.startsWith('node_modules/') && !entry.optional);
  return needed.filter(([path, entry]) => !existsSync(join(root, path)) || installed[path]?.version !== entry.version).length;
}

function packagesIn(file) {
  return existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')).packages : {};
}
