/** Imports run one way: schemas and analysis know nothing of server or client; modules and features keep apart. */
const only = (name, from, to) => ({
  name,
  severity: 'error',
  from: { path: from },
  to: { path: '^(schemas|analysis|backend|frontend|tests)/', pathNot: to },
});

module.exports = {
  forbidden: [
    {
      name: 'no-cycle',
      severity: 'error',
      from: { pathNot: '\\.entity\\.ts$' },
      to: { circular: true, viaOnly: { pathNot: '\\.entity\\.ts$' } },
    },
    only('schemas', '^schemas/', '^schemas/'),
    only('analysis', '^analysis/', '^analysis/'),
    {
      name: 'analysis-packages',
      severity: 'error',
      from: { path: '^analysis/', pathNot: '(\\.test\\.ts$|^analysis/(numerics|cli)/)' },
      to: { pathNot: '^analysis/' },
    },
    {
      name: 'analysis-core-knows-no-cli',
      severity: 'error',
      from: { path: '^analysis/', pathNot: '^analysis/cli/' },
      to: { path: '^analysis/cli/' },
    },
    {
      name: 'schemas-packages',
      severity: 'error',
      from: { path: '^schemas/', pathNot: '(\\.test\\.ts$|^schemas/expressions/)' },
      to: { path: 'node_modules', pathNot: 'node_modules/(@casl/ability|json-schema-to-ts)' },
    },
    only('server', '^backend/(http|database|config|jobs|services)/', '^(schemas|backend/(http|database|config|jobs|services))/'),
    only(
      'module',
      '^backend/modules/([^/]+)/',
      '^(schemas|analysis|backend/(http|database|config|jobs|services)|backend/modules/$1)/|^backend/modules/[^/]+/(index|[^/]+\\.entity)\\.ts$',
    ),
    only('shared', '^frontend/(components|forms|lib)/', '^(schemas|analysis|frontend/(components|forms|lib))/'),
    only(
      'feature',
      '^frontend/features/([^/]+)/',
      '^(schemas|analysis|frontend/(components|forms|lib|features/$1))/',
    ),
    only('page', '^frontend/pages/', '^(schemas|analysis|frontend/(components|forms|lib|features|pages))/'),
    only('front', '^frontend/', '^(schemas|analysis|frontend)/'),
    { name: 'tests', severity: 'error', from: { pathNot: '^tests/' }, to: { path: '^tests/' } },
  ],
  options: {
    tsConfig: { fileName: 'tsconfig.json' },
    tsPreCompilationDeps: true,
    doNotFollow: { path: 'node_modules' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'node', 'default', 'types'],
    },
  },
};
