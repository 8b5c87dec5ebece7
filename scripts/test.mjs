// npm test: everything, from a clean clone with only "npm ci" done.
import { spawnSync } from 'node:child_process';
import { dirname, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = resolve(dirname(fileURLToPath(import.meta.url)), '..');
const node = process.execPath;
const steps = [
  ['postgres', node, ['scripts/pg.mjs', 'start']],
  ['build', 'npm', ['run', '--silent', 'build']],
  ['migrate', node, ['--import', 'tsx', '--conditions=foreveil-source', 'scripts/db.ts', 'migrate', 'seed']],
  ['jest', node, ['--experimental-vm-modules', 'node_modules/jest/bin/jest.js', '--runInBand', ...process.argv.slice(2)]],
  ['vitest', node, ['node_modules/vitest/vitest.mjs', 'run', '--root', 'client']],
];
for (const [name, cmd, args] of steps) {
  const t = Date.now();
  const r = spawnSync(cmd, args, { cwd: root, stdio: 'inherit', env: { ...process.env, NODE_ENV: name === 'build' ? 'production' : 'test', NODE_NO_WARNINGS: '1' } });
  console.log(`== ${name}: ${r.status === 0 ? 'ok' : `FAILED (${r.status})`} in ${((Date.now() - t) / 1000).toFixed(1)} s`);
  if (r.status !== 0) process.exit(r.status ?? 1);
}
