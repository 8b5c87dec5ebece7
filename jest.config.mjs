const common = {
  testEnvironment: 'node',
  // 'foreveil-source' makes @foreveil/shared resolve to its TypeScript source, as in vite.config.ts and tsconfig.jest.json
  testEnvironmentOptions: { customExportConditions: ['foreveil-source', 'node', 'node-addons'] },
  modulePathIgnorePatterns: ['<rootDir>/.*/dist/', '<rootDir>/.data/'],
  extensionsToTreatAsEsm: ['.ts'],
  moduleNameMapper: { '^(\\.{1,2}/.*)\\.js$': '$1' },
  transform: { '^.+\\.ts$': ['ts-jest', { useESM: true, tsconfig: '<rootDir>/tsconfig.jest.json' }] },
};
// starts the PostgreSQL of the tests when DATABASE_URL does not name another one
const withDatabase = { globalSetup: '<rootDir>/test/support/postgres-up.mjs', globalTeardown: '<rootDir>/test/support/postgres-down.mjs' };

/** @type {import('jest').Config} */
export default {
  testTimeout: 60_000,
  projects: [
    { ...common, displayName: 'unit', testMatch: ['<rootDir>/{shared,server}/src/**/*.spec.ts', '<rootDir>/scripts/**/*.spec.mjs'] },
    { ...common, displayName: 'reference', testMatch: ['<rootDir>/test/{reference,reading}/**/*.spec.ts'] },
    { ...common, ...withDatabase, displayName: 'api', testMatch: ['<rootDir>/test/api/**/*.spec.ts'] },
    { ...common, ...withDatabase, displayName: 'browser', testMatch: ['<rootDir>/test/browser/**/*.spec.ts'] },
  ],
};
