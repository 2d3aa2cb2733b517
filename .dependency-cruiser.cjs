/** The import arrows of the house; docs/architecture.md draws them. */
const rule = (name, from, to) => ({ name, severity: 'error', from, to });

module.exports = {
  forbidden: [
    rule('no-cycles', {}, { circular: true }),
    rule('shared-is-pure', { path: '^shared/src', pathNot: '\\.test\\.ts$' }, { dependencyTypes: ['core'] }),
    rule(
      'shared-stands-alone',
      { path: '^shared/src' },
      { path: '^(adapters|orchestrator|console|test-benches)/' },
    ),
    rule('adapters-look-down', { path: '^adapters/src' }, { path: '^(orchestrator|console|test-benches)/' }),
    rule('benches-look-down', { path: '^test-benches/src' }, { path: '^(orchestrator|console)/' }),
    // A bench speaks for itself on the wire: the product's own adapters read it in tests and benchmarks only.
    rule(
      'benches-stand-alone',
      { path: '^test-benches/src', pathNot: '(\\.test\\.ts$|\\.fixture\\.ts$|/benchmarks/)' },
      { path: '^adapters/' },
    ),
    rule('console-looks-down', { path: '^console/src' }, { path: '^(adapters|orchestrator|test-benches)/' }),
    rule('orchestrator-looks-down', { path: '^orchestrator/src' }, { path: '^(console|test-benches)/' }),
    rule(
      'rig-host-has-no-nest',
      { path: '^orchestrator/src/rig-host/' },
      { path: '(@nestjs/|^orchestrator/src/(?!rig-host/|recordings/run-file))' },
    ),
    rule(
      'features-stay-apart',
      { path: '^console/src/features/([^/]+)/' },
      { path: '^console/src/features/([^/]+)/', pathNot: '^console/src/features/($1/|[^/]+/index\\.ts$)' },
    ),
    rule(
      'no-test-code-in-product',
      { path: 'src/', pathNot: '\\.(test|spec)\\.tsx?$' },
      { path: '\\.(test|spec)\\.tsx?$' },
    ),
  ],
  options: {
    tsPreCompilationDeps: true,
    doNotFollow: { path: '(node_modules|dist)' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['source', 'import', 'node', 'default', 'types'],
    },
    tsConfig: { fileName: 'tsconfig.base.json' },
  },
};
