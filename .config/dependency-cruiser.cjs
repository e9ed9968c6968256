const ORDER = [
  'errors', 'findings', 'tables', 'numeric', 'fits', 'spectrum', 'continuum', 'velocity', 'features', 'typing',
  'ephemeris', 'quality', 'night', 'report', 'settings', 'demo', 'pipeline', 'index',
]
const place = (name) => `^src/${name}(/|\\.ts$)`
const MEASURING = ['numeric', 'fits', 'spectrum', 'continuum', 'velocity', 'features', 'typing', 'ephemeris', 'quality', 'night', 'report', 'settings']

/** @type {import('dependency-cruiser').IConfiguration} */
module.exports = {
  forbidden: [
    { name: 'no-cycle', severity: 'error', from: {}, to: { circular: true } },
    { name: 'no-unresolved', severity: 'error', from: {}, to: { couldNotResolve: true } },
    ...ORDER.slice(0, -1).map((name, i) => ({
      name: `${name}-imports-from-its-left`,
      comment: 'A stage imports only from its own folder or from folders to its left (see the order in DEVELOPERS.md).',
      severity: 'error',
      from: { path: place(name) },
      to: { path: ORDER.slice(i + 1).map(place) },
    })),
    {
      name: 'tables-are-handed-down',
      comment: 'Literal data reach a measuring stage as arguments, so that it can be tested with a three-row table.',
      severity: 'error',
      from: { path: MEASURING.map(place) },
      to: { path: '^src/tables/', pathNot: '^src/tables/types\\.ts$' },
    },
    {
      name: 'src-touches-no-machine',
      severity: 'error',
      from: { path: '^src/' },
      to: { path: '^(node:)?(fs|fs/promises|os|path|process|child_process|worker_threads|net|http|https|readline|tty)$' },
    },
    { name: 'src-knows-no-cli', severity: 'error', from: { path: '^src/' }, to: { path: '^(cli|tests)/' } },
    {
      name: 'nothing-unused',
      severity: 'error',
      from: { orphan: true, path: '^(src|cli)/', pathNot: ['^src/index\\.ts$', '^cli/(main|worker)\\.ts$'] },
      to: {},
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.json' },
    enhancedResolveOptions: { extensions: ['.ts', '.js', '.mjs', '.cjs', '.json'], exportsFields: ['exports'], conditionNames: ['import', 'types', 'node', 'default'] },
  },
}
