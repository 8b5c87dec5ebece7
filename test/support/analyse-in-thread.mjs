// The same as analyse-files.ts, in a thread of its own: Node hands the loader of TypeScript down to no thread, so it is registered there.
import { isMainThread, Worker } from 'node:worker_threads';

if (isMainThread) new Worker(new URL(import.meta.url), { argv: process.argv.slice(2) });
else {
  const { register } = await import('tsx/esm/api');
  register();
  await import('./analyse-files.ts');
}
