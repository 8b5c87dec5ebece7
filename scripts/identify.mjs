// npm run --silent identify -- FILE...: the analysis without a server.
import { requireNode } from './lib/node-version.mjs';

requireNode();
const { runHeadless } = await import('./lib/headless.mjs');
await runHeadless('identify');
