// npm start: everything from a clean clone to a running workbench. Plain Node at first, since no package may be installed yet.
import { requireNode } from './lib/node-version.mjs';

requireNode();
import('./lib/start.mjs').then(({ start }) => start());
