import { build } from './build.mjs';
import { ensureDependencies } from './dependencies.mjs';
import { root } from './paths.mjs';
import { tell } from './say.mjs';
import { onInterruption, runTracked } from './supervisor.mjs';

/** Runs an entry of the server that needs no server, 'identify': compiles first what changed; only results go to standard output. */
export async function runHeadless(entry) {
  onInterruption();
  await tell(async () => {
    await ensureDependencies();
    await build(['server']);
    // file names are meant from where the person stands, not from where npm takes the command
    const args = ['--enable-source-maps', `${root}/server/dist/${entry}.js`, ...process.argv.slice(2)];
    process.exitCode = await runTracked(process.execPath, args, { cwd: process.env.INIT_CWD ?? process.cwd() });
  });
}
