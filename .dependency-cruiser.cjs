/** @type {import('dependency-cruiser').IConfiguration} */
module.exports = {
  forbidden: [
    { name: 'no-circular', severity: 'error', from: {}, to: { circular: true } },
    { name: 'shared-stands-alone', severity: 'error', from: { path: '^shared/src' }, to: { path: '^(server|client)/' } },
    { name: 'client-not-server', severity: 'error', from: { path: '^client/src' }, to: { path: '^server/' } },
    { name: 'server-not-client', severity: 'error', from: { path: '^server/src' }, to: { path: '^client/' } },
    { name: 'no-unresolved', severity: 'error', from: {}, to: { couldNotResolve: true } },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '\\.spec\\.tsx?$' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.jest.json' },
    enhancedResolveOptions: { conditionNames: ['foreveil-source', 'import', 'require', 'node', 'default', 'types'], exportsFields: ['exports'] },
  },
};
