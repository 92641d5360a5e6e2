import js from '@eslint/js';
import astro from 'eslint-plugin-astro';
import reactHooks from 'eslint-plugin-react-hooks';
import { defineConfig } from 'eslint/config';
import globals from 'globals';
import ts from 'typescript-eslint';

const tellNothing = ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_', caughtErrors: 'all' }];

/** The pure rooms know no clock, chance, network, environment or framework. */
const impure = [
  { object: 'Date', property: 'now', message: 'Take the instant as an argument.' },
  { object: 'Math', property: 'random', message: 'Take the chance as an argument.' },
  { object: 'process', property: 'env', message: 'Take the setting as an argument.' },
];
const outsidePureRooms = {
  group: [
    'astro',
    'astro:*',
    'astro/*',
    'node:*',
    'react',
    '**/server/**',
    '**/pages/**',
    '**/components/**',
    '**/layouts/**',
    '**/launch/**',
  ],
  message: 'The pure rooms import nothing of the server, of pages or of a framework.',
};

export default defineConfig([
  { ignores: ['dist/', '.astro/', '.data/', '.shots/', 'coverage/', 'drizzle/'] },
  js.configs.recommended,
  ts.configs.recommended,
  astro.configs.recommended,
  {
    languageOptions: { globals: { ...globals.node, ...globals.browser } },
    linterOptions: { reportUnusedDisableDirectives: 'error', noInlineConfig: true },
    rules: {
      'no-undef': 'off',
      eqeqeq: 'error',
      'no-console': 'off',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': tellNothing,
      '@typescript-eslint/consistent-type-imports': ['error', { disallowTypeAnnotations: false }],
    },
  },
  {
    files: ['src/**/*.{ts,tsx}', 'fakes/**/*.ts', 'tests/**/*.{ts,tsx}'],
    languageOptions: { parserOptions: { projectService: true } },
    rules: {
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': 'error',
      '@typescript-eslint/await-thenable': 'error',
    },
  },
  {
    files: ['src/**/*.{ts,tsx}'],
    ignores: ['src/launch/**', 'src/demo/**'],
    rules: { 'no-console': 'error' },
  },
  {
    files: ['src/env.d.ts'],
    rules: { '@typescript-eslint/triple-slash-reference': 'off' },
  },
  {
    files: ['src/components/**/*.tsx'],
    extends: [reactHooks.configs.flat.recommended],
  },
  {
    files: ['src/casting/**', 'src/commission/**'],
    rules: {
      'no-restricted-imports': ['error', { patterns: [outsidePureRooms] }],
      'no-restricted-properties': ['error', ...impure],
    },
  },
  {
    files: ['src/casting/**'],
    rules: {
      'no-restricted-imports': [
        'error',
        {
          patterns: [
            outsidePureRooms,
            { group: ['**/commission/**'], message: 'The metal knows nothing of the agreement.' },
          ],
        },
      ],
    },
  },
  {
    files: ['src/server/**', 'src/demo/**', 'src/launch/**'],
    rules: {
      'no-restricted-imports': [
        'error',
        {
          patterns: [
            { group: ['astro:*', '**/pages/**'], message: 'This also runs outside Astro, and pages call it.' },
          ],
        },
      ],
    },
  },
]);
