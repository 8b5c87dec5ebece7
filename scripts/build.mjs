// npm run build: compiles what changed, into server/dist, shared/dist and client/dist.
import { requireNode } from './lib/node-version.mjs';

requireNode();
const { build } = await import('./lib/build.mjs');
const { tell } = await import('./lib/say.mjs');
await tell(() => build());
