import js from '@eslint/js';
import { defineConfig } from 'eslint/config';
import reactHooks from 'eslint-plugin-react-hooks';
import tseslint from 'typescript-eslint';

/** Imports that would point up (see docs/architecture.md); dependency-cruiser holds the whole law. */
const forbid = (...group) => ({
  'no-restricted-imports': [
    'error',
    { patterns: [{ group, message: 'Import arrows point down only: see docs/architecture.md.' }] },
  ],
});

/** The pure core takes time as a parameter and touches neither clock nor process. */
const pureCore = {
  'no-restricted-globals': [
    'error',
    ...[
      'Date',
      'performance',
      'process',
      'setTimeout',
      'setInterval',
      'setImmediate',
      'window',
      'document',
      'fetch',
      'console',
    ].map((name) => ({ name, message: 'The pure core has no clock and no I/O: pass it in.' })),
  ],
  'no-restricted-properties': [
    'error',
    { object: 'Math', property: 'random', message: 'Pass a seeded generator in.' },
  ],
};

export default defineConfig(
  {
    ignores: [
      '**/dist/',
      'data/',
      '**/*.{js,mjs,cjs}',
      '*/*.config.ts',
      '*.config.ts',
      'console/src/api/schema.d.ts',
    ],
  },
  js.configs.recommended,
  tseslint.configs.recommendedTypeChecked,
  { languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } } },
  {
    rules: {
      '@typescript-eslint/switch-exhaustiveness-check': [
        'error',
        { considerDefaultExhaustiveForUnions: true },
      ],
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true }],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
      'max-lines': ['error', { max: 400 }],
      eqeqeq: 'error',
    },
  },
  {
    files: ['shared/src/**/*.ts'],
    rules: { ...forbid('node:*', '@cresthold/*', '@nestjs/*', 'react*'), ...pureCore },
  },
  {
    files: ['adapters/src/**/*.ts'],
    rules: forbid('@cresthold/orchestrator*', '@cresthold/console*', '@nestjs/*'),
  },
  {
    files: ['test-benches/src/**/*.ts'],
    rules: forbid('@cresthold/orchestrator*', '@cresthold/adapters*', '@cresthold/console*'),
  },
  {
    // As in .dependency-cruiser.cjs: tests and benchmarks read the benches by the product's own adapters.
    files: ['test-benches/src/**/*.{test,fixture}.ts', 'test-benches/src/benchmarks/**/*.ts'],
    rules: forbid('@cresthold/orchestrator*', '@cresthold/console*'),
  },
  { files: ['orchestrator/src/rig-host/**/*.ts'], rules: forbid('@nestjs/*') },
  {
    files: ['console/src/**/*.{ts,tsx}'],
    rules: forbid('@cresthold/orchestrator*', '@cresthold/adapters*', 'node:*'),
  },
  {
    files: ['**/*.{test,spec}.{ts,tsx}', 'orchestrator/test/**/*.ts'],
    rules: {
      '@typescript-eslint/no-unsafe-argument': 'off',
      '@typescript-eslint/no-unsafe-assignment': 'off',
      '@typescript-eslint/no-unsafe-member-access': 'off',
      '@typescript-eslint/no-unsafe-call': 'off',
      '@typescript-eslint/no-unsafe-return': 'off',
      // Tests of the pure core may print figures and drive a clock.
      'no-restricted-globals': 'off',
    },
  },
  { files: ['console/**/*.{ts,tsx}'], extends: [reactHooks.configs.flat['recommended-latest']] },
);
