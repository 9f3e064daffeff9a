/** The arrows of the house: pages -> components -> lib; pages -> server -> db, lib; lib imports only lib. */
const order = ['units', 'money', 'plan', 'timber', 'shape', 'stock', 'book'];
const lowerOnly = [
  { from: 'units', may: ['units'] },
  { from: 'money', may: ['money'] },
  { from: 'plan', may: ['units', 'money', 'timber', 'plan'] },
  { from: 'timber', may: ['units', 'timber'] },
  { from: 'shape', may: ['units', 'plan', 'shape'] },
  { from: 'stock', may: ['units', 'plan', 'stock'] },
  { from: 'book', may: order },
];

module.exports = {
  forbidden: [
    {
      name: 'no-circular',
      severity: 'error',
      from: {},
      to: { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } },
    },
    {
      name: 'lib-is-pure',
      severity: 'error',
      from: { path: '^src/lib' },
      to: { path: '^(src/(?!lib)|db|tests|content)' },
    },
    {
      name: 'lib-has-no-node',
      severity: 'error',
      from: { path: '^src/lib' },
      to: { dependencyTypes: ['core'] },
    },
    ...lowerOnly.map(({ from, may }) => ({
      name: `lib-${from}-looks-down`,
      severity: 'error',
      from: { path: `^src/lib/${from}/` },
      to: { path: '^src/lib/', pathNot: `^src/lib/(${may.join('|')})/` },
    })),
    {
      name: 'components-know-no-server',
      severity: 'error',
      from: { path: '^src/(components|layouts)' },
      to: { path: '^(src/server|db)', dependencyTypesNot: ['type-only'] },
    },
    {
      name: 'server-knows-no-pages',
      severity: 'error',
      from: { path: '^src/server' },
      to: { path: '^src/(pages|components|layouts)' },
    },
    {
      name: 'db-knows-no-source',
      severity: 'error',
      from: { path: '^db/(models|migrations|client|migrate)' },
      to: { path: '^src/(pages|components|layouts|server/(?!env\\.ts))' },
    },
    { name: 'source-knows-no-tests', severity: 'error', from: { path: '^(src|db)' }, to: { path: '^tests' } },
    {
      name: 'no-orphan-packages',
      severity: 'error',
      from: { path: '^(src|db)' },
      to: { dependencyTypes: ['npm-no-pkg', 'npm-unknown'] },
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.json' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'node', 'default', 'types'],
      extensions: ['.ts', '.tsx', '.mjs', '.js', '.astro'],
    },
  },
};
