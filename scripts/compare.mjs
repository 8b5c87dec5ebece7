// npm run --silent compare -- FILE_A FILE_B: two sightlines compared without a server. Compiles first what changed; only results go to standard output.
import { requireNode } from './lib/node-version.mjs';

requireNode();
const { build } = await import('./lib/build.mjs');
const { ensureDependencies } = await import('./lib/dependencies.mjs');
const { root } = await import('./lib/paths.mjs');
const { tell } = await import('./lib/say.mjs');
const { onInterruption, runTracked } = await import('./lib/supervisor.mjs');

onInterruption();
await tell(async () => {
  await ensureDependencies();
  await build(['server']);
  // file names are meant from where the person stands, not from where npm takes the command
  const args = ['--enable-source-maps', `${root}/server/dist/compare.js`, ...process.argv.slice(2)];
  process.exitCode = await runTracked(process.execPath, args, { cwd: process.env.INIT_CWD ?? process.cwd() });
});
