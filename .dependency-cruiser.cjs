/** Rules of the house: data goes one way (DEVELOPERS.md, "Where things live"). */
module.exports = {
  forbidden: [
    {
      name: 'analysis-is-pure',
      comment: 'analysis/ knows no Node, no DOM, no other folder of the project',
      severity: 'error',
      from: { path: '^analysis/' },
      to: { path: '^(main|renderer|fixtures|test)/' },
    },
    {
      name: 'analysis-has-no-node',
      severity: 'error',
      from: { path: '^analysis/' },
      to: { dependencyTypes: ['core'] },
    },
    {
      name: 'analysis-libraries',
      comment:
        'zod for the border and ml-matrix for linear algebra are the only libraries that the measurement itself needs',
      severity: 'error',
      from: { path: '^analysis/' },
      to: { dependencyTypes: ['npm', 'npm-dev', 'npm-optional'], pathNot: '/(zod|ml-matrix)/' },
    },
    {
      name: 'main-does-not-look-down',
      severity: 'error',
      from: { path: '^main/' },
      to: { path: '^(renderer|test)/' },
    },
    {
      name: 'main-uses-fixtures-for-the-demo-only',
      severity: 'error',
      from: { path: '^main/', pathNot: '^main/cli/demo\\.ts$' },
      to: { path: '^fixtures/' },
    },
    {
      name: 'renderer-imports-only-types-of-main',
      severity: 'error',
      from: { path: '^renderer/' },
      to: { path: '^main/', dependencyTypesNot: ['type-only'] },
    },
    {
      name: 'renderer-stays-in-the-browser',
      severity: 'error',
      from: { path: '^renderer/' },
      to: { path: '^(fixtures|test)/' },
    },
    {
      name: 'renderer-has-no-node',
      severity: 'error',
      from: { path: '^renderer/' },
      to: { dependencyTypes: ['core'] },
    },
    {
      name: 'fixtures-stand-alone',
      comment: 'truth for a test never comes from the code under test',
      severity: 'error',
      from: { path: '^fixtures/' },
      to: { path: '^(main|renderer|test)/' },
    },
    { name: 'no-circles', severity: 'error', from: {}, to: { circular: true } },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.json' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'require', 'node', 'default', 'types'],
    },
  },
};
