// npm test: everything. npm test -- unit api: these steps. npm test -- unit planck: test files whose path has "planck", of that step.
import { requireNode } from './lib/node-version.mjs';

requireNode();
import('./lib/testing/run.mjs').then(({ test }) => test(process.argv.slice(2)));
