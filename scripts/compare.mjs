// npm run --silent compare -- FILE_A FILE_B: two sightlines compared without a server.
import { requireNode } from './lib/node-version.mjs';

requireNode();
const { runHeadless } = await import('./lib/headless.mjs');
await runHeadless('compare');
