import next from 'eslint-config-next/core-web-vitals'
import typescript from 'eslint-config-next/typescript'

const noEnvironment = {
  selector: "MemberExpression[object.name='process'][property.name='env']",
  message: 'Read the environment in lib/env.ts only.',
}

const config = [
  {
    ignores: [
      '**/node_modules/',
      '.next*/',
      '.data/',
      '.test-data/',
      'coverage/',
      'next-env.d.ts',
      'drizzle/',
      'tests/browser/out/',
    ],
  },
  ...next,
  ...typescript,
  {
    files: ['**/*.ts', '**/*.tsx'],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: {
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/only-throw-error': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
      'no-console': 'error',
      'no-restricted-syntax': ['error', noEnvironment],
    },
  },
  {
    files: ['lib/env.ts', 'db/seed/**', 'tests/**', 'lib/launch/**', '*.config.*', 'instrumentation.ts'],
    rules: { 'no-restricted-syntax': 'off', 'no-console': 'off' },
  },
  {
    // No React there: a function may begin with "use" for other reasons.
    files: ['dsp/**', 'lib/**', 'db/**', 'tests/**'],
    rules: { 'react-hooks/rules-of-hooks': 'off' },
  },
  {
    files: ['dsp/**'],
    rules: {
      'no-restricted-globals': [
        'error',
        'window',
        'document',
        'process',
        'Date',
        'performance',
        'fetch',
        'self',
        'navigator',
      ],
      'no-restricted-properties': [
        'error',
        { object: 'Math', property: 'random', message: 'dsp is deterministic: take a seed.' },
      ],
    },
  },
]

export default config
