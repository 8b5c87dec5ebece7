import { join } from 'node:path';
import { root } from '../paths.mjs';

/**
 * @typedef {object} Step
 * @property {string} name what `npm test -- NAME` selects
 * @property {string} what in words
 * @property {string[]} command
 * @property {string} [report] file with the runner's JSON report; a step without one counts as one check, passed or failed
 * @property {('build' | 'database' | 'chromium')[]} needs
 * @property {boolean} [alone] not beside other steps
 */

const node = process.execPath;
const bin = (path) => join('node_modules', path);
export const reportsDir = join(root, 'test', 'output', 'reports');
const reportOf = (name) => join(reportsDir, `${name}.json`);

const check = (name, what, ...command) => ({ name, what, command: [node, ...command], needs: [] });

const jest = (name, what, more, patterns) => ({
  name,
  what,
  needs: [],
  report: reportOf(name),
  command: [
    node,
    ...['--experimental-vm-modules', '--disable-warning=ExperimentalWarning', bin('jest/bin/jest.js'), '--selectProjects', name],
    ...['--json', '--outputFile', reportOf(name), ...(more.workers ? [`--maxWorkers=${more.workers}`] : ['--runInBand']), ...patterns],
  ],
  ...more,
});

/** Everything `npm test` does; the API tests, which often wait, start early beside the rest. @param {string[]} patterns paths of test files; none: all @returns {Step[]} */
export const allSteps = (patterns) => [
  { name: 'build', what: 'server and client compile', command: [node, 'scripts/build.mjs'], needs: [] },
  check('lint', 'ESLint', bin('eslint/bin/eslint.js'), '.', '--max-warnings=0'),
  jest('api', 'HTTP with a real PostgreSQL', { needs: ['build', 'database'], workers: 2 }, patterns),
  check(
    'imports',
    'who imports whom',
    bin('dependency-cruiser/bin/dependency-cruise.mjs'),
    ...cruised,
    '--config',
    '.dependency-cruiser.cjs',
  ),
  check('format', 'Prettier', bin('prettier/bin/prettier.cjs'), '--check', '--log-level=warn', '.'),
  check('types', 'types of the client', bin('typescript/bin/tsc'), '-p', 'client'),
  check('types', 'types of shared, server, tests and scripts', bin('typescript/bin/tsc'), '-p', 'tsconfig.jest.json'),
  {
    name: 'client',
    what: 'tests of the client',
    needs: [],
    report: reportOf('client'),
    command: [
      ...[node, bin('vitest/vitest.mjs'), 'run', '--root', 'client', '--reporter=default', '--reporter=json'],
      ...[`--outputFile.json=${reportOf('client')}`, ...patterns],
    ],
  },
  jest('unit', 'tests of shared and server', {}, patterns),
  jest('reference', 'published values and foreign fixtures', {}, patterns),
  jest('browser', 'whole journeys in Chromium', { needs: ['build', 'database', 'chromium'], workers: 2, alone: true }, patterns),
];

const cruised = ['shared/src', 'server/src', 'client/src', 'migrations', 'seeds'];
