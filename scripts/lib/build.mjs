import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join, relative } from 'node:path';
import { withLock } from './lock.mjs';
import { dataFile, root } from './paths.mjs';
import { Complaint, say } from './say.mjs';
import { runTracked } from './supervisor.mjs';

const node = process.execPath;
const common = ['package-lock.json', 'tsconfig.base.json', 'shared/src', 'shared/package.json'];

const PARTS = {
  server: {
    inputs: [...common, 'shared/tsconfig.json', 'server/src', 'server/package.json', 'server/tsconfig.json'],
    outputs: ['shared/dist', 'server/dist'],
    command: [node, 'node_modules/typescript/bin/tsc', '-b', 'server'],
  },
  client: {
    inputs: [
      ...common,
      'client/src',
      'client/public',
      'client/index.html',
      'client/package.json',
      'client/tsconfig.json',
      'client/vite.config.ts',
    ],
    outputs: ['client/dist'],
    command: [node, 'node_modules/vite/bin/vite.js', 'build', 'client', '--logLevel', 'warn'],
  },
};

/**
 * Compiles the parts whose sources changed since they were last compiled, or whose output is not all there.
 * @param {('server' | 'client')[]} parts
 */
export async function build(parts = ['server', 'client']) {
  await withLock(dataFile('build.lock'), async () => {
    const stale = parts.filter((part) => !isFresh(part));
    if (stale.length > 0) say(`building the ${stale.join(' and the ')}`);
    const built = await Promise.all(stale.map(compile));
    const failed = stale.filter((_, i) => !built[i]);
    if (failed.length > 0) throw new Complaint(`The ${failed.join(' and the ')} cannot be built; why stands above.`);
  });
}

/** From nothing, since the compiler neither restores a deleted file nor deletes what a deleted source left. */
async function compile(part) {
  const { outputs, command } = PARTS[part];
  const inputs = digest(part); // before, so that a change made meanwhile counts as one
  for (const folder of outputs) rmSync(join(root, folder), { recursive: true, force: true });
  const env = { ...process.env, NODE_ENV: 'production' };
  if ((await runTracked(command[0], command.slice(1), { env, stdio: ['ignore', 2, 2] })) !== 0) return false;
  writeFileSync(stampOf(part), JSON.stringify({ inputs, outputs: outputs.flatMap(filesIn) }));
  return true;
}

function isFresh(part) {
  if (!existsSync(stampOf(part))) return false;
  const stamp = JSON.parse(readFileSync(stampOf(part), 'utf8'));
  return stamp.inputs === digest(part) && stamp.outputs.every((file) => existsSync(join(root, file)));
}

const stampOf = (part) => dataFile('build', `${part}.json`);

/** One hash over the names and contents of everything a part is made from. */
function digest(part) {
  const hash = createHash('sha256').update(process.version);
  for (const file of PARTS[part].inputs.flatMap(filesIn)) {
    if (/\.spec\.tsx?$/.test(file)) continue;
    hash.update(`\0${file}\0`).update(readFileSync(join(root, file)));
  }
  return hash.digest('hex');
}

/** Files at or below a path of the checkout, sorted; none when it does not exist. */
function filesIn(path) {
  const full = join(root, path);
  if (!existsSync(full)) return [];
  if (!statSync(full).isDirectory()) return [path];
  const entries = readdirSync(full, { recursive: true, withFileTypes: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => relative(root, join(entry.parentPath ?? entry.path, entry.name)))
    .sort();
}
