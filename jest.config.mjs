const common = {
  testEnvironment: 'node',
  // 'foreveil-source' makes @foreveil/shared resolve to its TypeScript source, as in vite.config.ts and tsconfig.jest.json
  testEnvironmentOptions: { customExportConditions: ['foreveil-source', 'node', 'node-addons'] },
  modulePathIgnorePatterns: ['<rootDir>/.*/dist/', '<rootDir>/.data/'],
  extensionsToTreatAsEsm: ['.ts'],
  moduleNameMapper: { '^(\\.{1,2}/.*)\\.js$': '$1' },
  transform: { '^.+\\.ts$': ['ts-jest', { useESM: true, tsconfig: '<rootDir>/tsconfig.jest.json' }] },
};
/** @type {import('jest').Config} */
export default {
  testTimeout: 30_000,
  projects: [
    { ...common, displayName: 'unit', testMatch: ['<rootDir>/shared/src/**/*.spec.ts', '<rootDir>/server/src/**/*.spec.ts'] },
    { ...common, displayName: 'api', testMatch: ['<rootDir>/test/api/**/*.spec.ts'] },
    { ...common, displayName: 'ui', testMatch: ['<rootDir>/test/ui/**/*.spec.ts'] },
  ],
};
