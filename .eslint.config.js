import js from '@eslint/js';
import hooks from 'eslint-plugin-react-hooks';
import { defineConfig, globalIgnores } from 'eslint/config';
import ts from 'typescript-eslint';

/** Layers: shared knows nobody; the client never sees the server; features meet through shared views. */
const forbid = (...groups) => ({
  'no-restricted-imports': ['error', { patterns: groups.map(([group, message]) => ({ group, message })) }],
});

/** Logic is short; tables of a workbook and markup of a page are long and flat. */
const longest = (max) => ({ 'max-lines-per-function': ['error', { max, skipComments: true }] });

export default defineConfig(
  globalIgnores(['dist', 'node_modules', '.tallyweir', 'drizzle']),
  js.configs.recommended,
  ts.configs.strict,
  {
    rules: {
      '@typescript-eslint/no-non-null-assertion': 'off',
      '@typescript-eslint/no-unused-vars': [
        'error',
        { argsIgnorePattern: '^_', varsIgnorePattern: '^_', ignoreRestSiblings: true },
      ],
      '@typescript-eslint/consistent-type-imports': [
        'error',
        { fixStyle: 'separate-type-imports', disallowTypeAnnotations: false },
      ],
      eqeqeq: 'error',
      'no-console': 'error',
    },
  },
  {
    files: ['server/main.ts', 'server/start/*.mjs', 'tests/bench/**'],
    languageOptions: { globals: { console: 'readonly', process: 'readonly', URL: 'readonly' } },
    rules: { 'no-console': 'off' },
  },
  { files: ['shared/**'], rules: longest(90) },
  { files: ['server/**'], rules: longest(130) },
  { files: ['src/**'], rules: longest(180) },
  {
    files: ['shared/**'],
    rules: {
      ...forbid([
        ['#server/*', '#src/*', 'node:*', 'react*', 'express', 'drizzle-orm*', 'pg'],
        'shared is pure: values in, values out.',
      ]),
      'no-restricted-globals': ['error', 'process', 'fetch', 'window', 'document', 'localStorage'],
    },
  },
  { files: ['server/**'], rules: forbid([['#src/*', 'react*'], 'The server does not know the client.']) },
  {
    files: ['server/features/**/*-routes.ts'],
    rules: forbid(
      [['**/*-repository.ts', 'drizzle-orm*', 'pg'], 'Routes call services.'],
      [['#src/*'], 'The server does not know the client.'],
    ),
  },
  {
    files: ['src/**/*.{ts,tsx}'],
    plugins: { 'react-hooks': hooks },
    rules: {
      ...hooks.configs.recommended.rules,
      ...forbid([
        ['#server/*', '**/server/**', 'node:*'],
        'The client never imports the server, not even types.',
      ]),
    },
  },
);
