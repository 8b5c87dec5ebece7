import { existsSync } from 'node:fs';
import { spawnSync } from 'node:child_process';
import { run } from './processes.mjs';
import { Complaint, say } from './say.mjs';

export const isRoot = process.getuid?.() === 0;

/**
 * Installs a Debian package, as root or through sudo where that asks for no password. Elsewhere says what to install and gives up.
 * @param prepare shell commands to run as root first
 */
export function installDebianPackage(name, { purpose, prepare = 'true' }) {
  const asRoot = isRoot ? [] : ['sudo', '-n'];
  if (!existsSync('/usr/bin/apt-get') || !(isRoot || maySudo())) {
    throw new Complaint(`${purpose} is missing, and this account may not install it. Please install it, on Debian and Ubuntu with

    sudo apt-get install ${name}

and run the same command again.`);
  }
  say(`installing the Debian package ${name} (${purpose})`);
  const script = `set -e; ${prepare}; export DEBIAN_FRONTEND=noninteractive; apt-get update -qq; apt-get install -y -qq --no-install-recommends ${name}`;
  const [command, ...args] = [...asRoot, 'sh', '-c', script];
  run(command, args, { what: `installing ${name}`, stdio: ['ignore', 'pipe', 'pipe'] });
}

const maySudo = () => spawnSync('sudo', ['-n', 'true'], { stdio: 'ignore' }).status === 0;
