import { spawnSync } from 'node:child_process';
import { accessSync, constants } from 'node:fs';
import { installDebianPackage } from './debian.mjs';
import { Complaint } from './say.mjs';

const NAMES = ['chromium', 'chromium-browser', 'google-chrome-stable', 'google-chrome'];

/** Path of a Chromium for the browser tests: the one CHROMIUM names, else one on the PATH, else Debian's package, installed now. */
export function chromium() {
  if (process.env.CHROMIUM) return checked(process.env.CHROMIUM);
  const found = onPath();
  if (found) return found;
  installDebianPackage('chromium', { purpose: 'Chromium, for the browser tests,' });
  return onPath() ?? checked('/usr/bin/chromium');
}

function onPath() {
  const script = NAMES.map((name) => `command -v ${name}`).join(' || ');
  return spawnSync('sh', ['-c', script], { encoding: 'utf8' }).stdout.trim() || null;
}

function checked(path) {
  try {
    accessSync(path, constants.X_OK);
    return path;
  } catch (error) {
    throw new Complaint(`${path} cannot be run as Chromium: ${error.message}`);
  }
}
