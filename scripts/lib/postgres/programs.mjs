import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { installDebianPackage } from '../debian.mjs';
import { Complaint } from '../say.mjs';

const OLDEST = 15;
const DEBIAN = '/usr/lib/postgresql';

/**
 * Folder with initdb, postgres, pg_ctl, psql. Installs them when they are missing.
 * @param major the version a data directory was made by; only that version can open it
 */
export function serverPrograms(major) {
  const found = find(major);
  if (found) return found;
  if (major) {
    throw new Complaint(`The database in .data was made by PostgreSQL ${major}, which is not installed any more.
Install it (apt-get install postgresql-${major}), or start with a new, empty database: npm run pg -- reset`);
  }
  installDebianPackage('postgresql', { purpose: `PostgreSQL ${OLDEST} or newer`, prepare: noDefaultCluster });
  return (
    find() ??
    fail(`PostgreSQL was installed, but no version from ${OLDEST} on is in ${DEBIAN}. Set PG_BIN to the folder that holds pg_ctl.`)
  );
}

/** The Debian package makes and starts a cluster of its own on port 5432 unless it is told not to before it is installed. */
const folder = '/etc/postgresql-common/createcluster.d';
const noDefaultCluster = `[ -e /etc/postgresql-common ] || { mkdir -p ${folder}; echo 'create_main_cluster = false' > ${folder}/no-main.conf; }`;

function find(major) {
  const folders = [process.env.PG_BIN, ...debianFolders(), folderOnPath()].filter(Boolean);
  return folders.find((bin) => {
    const version = versionIn(bin);
    return major ? version === major : version >= OLDEST;
  });
}

/** Newest first. */
function debianFolders() {
  const versions = existsSync(DEBIAN) ? readdirSync(DEBIAN) : [];
  return versions.sort((a, b) => Number(b) - Number(a)).map((version) => join(DEBIAN, version, 'bin'));
}

function folderOnPath() {
  const which = spawnSync('sh', ['-c', 'command -v pg_ctl'], { encoding: 'utf8' });
  return which.status === 0 ? dirname(which.stdout.trim()) : null;
}

/** Major version of the server program in a folder; NaN when there is none. */
function versionIn(bin) {
  const said = spawnSync(join(bin, 'postgres'), ['--version'], { encoding: 'utf8' }).stdout ?? '';
  return Number(/\(PostgreSQL\) (\d+)/.exec(said)?.[1]);
}

function fail(message) {
  throw new Complaint(message);
}
