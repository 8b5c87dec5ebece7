// npm start: private PostgreSQL, migrations, first-run demo data, then web server and job worker until Ctrl-C.
import { spawn, spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = resolve(dirname(fileURLToPath(import.meta.url)), '..');
const run = (cmd, args) => { const r = spawnSync(cmd, args, { cwd: root, stdio: 'inherit' }); if (r.status !== 0) process.exit(r.status ?? 1); };
const node = process.execPath;

if (!process.env.DATABASE_URL) run(node, ['scripts/pg.mjs', 'start']);
if (!process.argv.includes('--no-build')) run('npm', ['run', '--silent', 'build']);
if (!existsSync(join(root, 'server/dist/main.js'))) { console.error('server/dist is missing: npm run build'); process.exit(1); }
run(node, ['--import', 'tsx', '--conditions=foreveil-source', 'scripts/db.ts', 'migrate', 'seed-if-empty']);
let stopping = false;
const kids = ['main.js', 'worker.js'].map((f) => spawn(node, ['--enable-source-maps', join('server/dist', f)], { cwd: root, stdio: 'inherit', env: { NODE_ENV: 'production', ...process.env } }));
const stop = (code) => { if (stopping) return; stopping = true; process.exitCode = code; for (const k of kids) k.kill('SIGTERM'); };
for (const s of ['SIGINT', 'SIGTERM']) process.on(s, () => stop(0));
for (const k of kids) k.on('exit', (code) => stop(code ?? 1));
