// Who may import whom. DEVELOPERS.md has the picture; these rules are patterns, so a folder made tomorrow is covered too.

/** Folder of shared/src -> the folders beside it that it may import. A folder that is not in this table may import nothing. */
const SHARED = {
  units: [],
  numeric: [],
  spectrum: ['units'],
  reading: ['units', 'spectrum', 'frames'],
  recipes: [],
  noise: ['spectrum', 'numeric'],
  continuum: ['units', 'spectrum', 'numeric', 'noise'],
  detection: ['units', 'spectrum', 'noise', 'profiles', 'numeric'],
  profiles: ['units', 'spectrum', 'numeric'],
  atoms: ['units', 'numeric'],
  linelist: ['units'],
  frames: ['units'],
  identify: ['units', 'spectrum', 'linelist', 'profiles', 'atoms', 'numeric'],
  sightlines: ['spectrum', 'noise', 'profiles', 'linelist', 'atoms', 'units', 'numeric'],
  review: [],
  report: ['units', 'linelist', 'profiles', 'review', 'identify'],
  contract: [],
};

/** Only the shapes, for they describe what travels; no code comes along. */
const SHARED_TYPES_TOO = {
  atoms: ['linelist'],
  continuum: ['identify'],
  identify: ['continuum', 'detection', 'noise'],
  recipes: ['reading'],
  review: ['contract'],
  sightlines: ['identify'],
  report: ['contract', 'identify', 'reading', 'sightlines'],
  contract: ['identify', 'sightlines', 'reading', 'recipes', 'review', 'spectrum', 'linelist', 'units'],
};

const folders = (names) => `^shared/src/(${names.join('|')})/`;
const sharedRules = Object.entries(SHARED).flatMap(([folder, may]) => {
  const typesToo = [folder, ...may, ...(SHARED_TYPES_TOO[folder] ?? [])];
  return [
    {
      name: `shared-${folder}`,
      comment: `shared/src/${folder} may import ${may.join(', ') || 'nothing'} of shared`,
      severity: 'error',
      from: { path: folders([folder]) },
      to: { path: '^shared/src/', pathNot: folders([folder, ...may]), dependencyTypesNot: ['type-only'] },
    },
    {
      name: `shared-${folder}-types`,
      severity: 'error',
      from: { path: folders([folder]) },
      to: { path: '^shared/src/', pathNot: folders(typesToo), dependencyTypes: ['type-only'] },
    },
  ];
});

/** @type {import('dependency-cruiser').IConfiguration} */
module.exports = {
  forbidden: [
    ...sharedRules,
    {
      name: 'shared-folder-in-the-table',
      comment: 'give a new folder of shared/src its line in the table above',
      severity: 'error',
      from: { path: '^shared/src/[^/]+/', pathNot: folders(Object.keys(SHARED)) },
      to: { path: '.' },
    },
    {
      name: 'shared-is-pure',
      comment: 'no Node module and no package but the pure ones listed here',
      severity: 'error',
      from: { path: '^shared/src/' },
      to: { pathNot: ['^shared/src/', 'node_modules/(astronomy-engine|fast-xml-parser|fflate|papaparse|@types/papaparse)/'] },
    },
    { name: 'client-not-server', severity: 'error', from: { path: '^client/' }, to: { path: '^(server|scripts|migrations|seeds)/' } },
    { name: 'server-not-client', severity: 'error', from: { path: '^server/' }, to: { path: '^(client|scripts|test)/' } },
    {
      name: 'shared-by-its-front-door',
      comment: "import from '@foreveil/shared'",
      severity: 'error',
      from: { path: '^(server|client|migrations|seeds)/' },
      to: { path: '^shared/src/', pathNot: '^shared/src/index\\.ts$' },
    },
    {
      name: 'features-do-not-meet',
      comment: 'client/src/app puts features together; they do not import each other',
      severity: 'error',
      from: { path: '^client/src/features/([^/]+)/' },
      to: { path: '^client/src/features/', pathNot: '^client/src/features/$1/' },
    },
    {
      name: 'client-layers',
      comment: 'lib and components know no feature, plot knows lib only',
      severity: 'error',
      from: { path: '^client/src/(lib|components|plot|workers)/' },
      to: { path: '^client/src/(app|features)/' },
    },
    {
      name: 'client-lib-at-the-bottom',
      severity: 'error',
      from: { path: '^client/src/lib/' },
      to: { path: '^client/src/(components|plot)/' },
    },
    {
      name: 'only-app-imports-app',
      severity: 'error',
      from: { path: '^client/src/', pathNot: '^client/src/(app/|main\\.tsx$)' },
      to: { path: '^client/src/app/' },
    },
    {
      name: 'modules-meet-through-services',
      comment: 'a repository belongs to its module; others ask its service',
      severity: 'error',
      from: { path: '^server/src/modules/([^/]+)/' },
      to: { path: '^server/src/modules/[^/]+/.*repository\\.ts$', pathNot: '^server/src/modules/$1/' },
    },
    {
      name: 'common-knows-no-module',
      severity: 'error',
      from: { path: '^server/src/(common|config|database)/' },
      to: { path: '^server/src/modules/' },
    },
    { name: 'no-circular', severity: 'error', from: {}, to: { circular: true } },
    { name: 'no-unresolved', severity: 'error', from: {}, to: { couldNotResolve: true } },
    {
      name: 'declared-packages-only',
      severity: 'error',
      from: { path: '^(shared|server|client)/' },
      to: { dependencyTypes: ['npm-no-pkg', 'npm-unknown', 'npm-dev'], pathNot: ['node_modules/@types/', 'node_modules/(vite|vitest)/'] },
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: ['\\.spec\\.tsx?$', '/dist/', '^client/src/(test-setup|test)'] },
    tsPreCompilationDeps: true,
    combinedDependencies: true,
    tsConfig: { fileName: 'tsconfig.jest.json' },
    enhancedResolveOptions: {
      conditionNames: ['foreveil-source', 'import', 'require', 'node', 'default', 'types'],
      exportsFields: ['exports'],
    },
  },
};
