// npm run dev: like npm start, but compiles and restarts at every change, and serves the client from Vite, which replaces modules in place.
import { requireNode } from './lib/node-version.mjs';

requireNode();
import('./lib/dev.mjs').then(({ dev }) => dev());
