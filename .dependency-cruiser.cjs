/* Who may import whom. Types count as imports (tsPreCompilationDeps), and tests/check.mjs asserts that modules were really seen. */
module.exports = {
  forbidden: [
    { name: 'no-cycles', severity: 'error', from: {}, to: { circular: true } },
    {
      name: 'dsp-stands-alone',
      comment: 'The numbers know nothing of ours.',
      severity: 'error',
      from: { path: '^dsp' },
      to: { path: '^(app|components|lib|db|tests)/' },
    },
    {
      name: 'dsp-few-packages',
      severity: 'error',
      from: { path: '^dsp' },
      to: { path: 'node_modules', pathNot: 'node_modules/(complex\\.js|fft\\.js|zod|mathjs)/' },
    },
    {
      name: 'dsp-no-node',
      severity: 'error',
      from: { path: '^dsp' },
      to: { dependencyTypes: ['core'] },
    },
    {
      name: 'one-door-to-dsp',
      comment: 'dsp/index.ts is the only door.',
      severity: 'error',
      from: { path: '^(app|components|lib|db)/' },
      to: { path: '^dsp/', pathNot: '^dsp/index\\.ts$' },
    },
    {
      name: 'db-imports',
      comment: 'The seed makes accounts, so that it needs their hashes and roles.',
      severity: 'error',
      from: { path: '^db/' },
      to: { path: '^(app|components|tests)/|^lib/(?!env|errors|chains|designs|launch|permissions|auth/passwords)' },
    },
    {
      name: 'only-queries-touch-the-client',
      severity: 'error',
      from: { path: '^(app|components|lib)/', pathNot: '^lib/auth/' },
      to: { path: '^db/client' },
    },
    {
      name: 'components-imports',
      severity: 'error',
      from: { path: '^components/' },
      to: { path: '^(app|db|tests)/' },
    },
    { name: 'lib-imports', severity: 'error', from: { path: '^lib/' }, to: { path: '^(app|components|tests)/' } },
    { name: 'nobody-imports-app', severity: 'error', from: { pathNot: '^app/' }, to: { path: '^app/' } },
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
}
