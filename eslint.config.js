import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import ts from 'typescript-eslint';
import svelteConfig from './svelte.config.js';

export default ts.config(
  {
    ignores: [
      'build/',
      '.svelte-kit/',
      '.sedgeline/',
      'test-results/',
      'playwright-report/',
      'static/',
      'node_modules/'
    ]
  },
  js.configs.recommended,
  ...ts.configs.recommended,
  ...svelte.configs.recommended,
  prettier,
  ...svelte.configs.prettier,
  {
    languageOptions: { globals: { ...globals.browser, ...globals.node } },
    rules: {
      'no-undef': 'off',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      'no-console': 'off'
    }
  },
  {
    files: ['**/*.svelte', '**/*.svelte.ts'],
    languageOptions: {
      parserOptions: { projectService: true, extraFileExtensions: ['.svelte'], parser: ts.parser, svelteConfig }
    },
    rules: { 'svelte/no-navigation-without-resolve': 'off' }
  },
  {
    // The science is pure: no clock, no chance, no environment.
    files: ['src/lib/dynamics/**/*.ts'],
    ignores: ['**/*.test.ts'],
    rules: {
      'no-restricted-globals': ['error', 'Date', 'performance', 'process', 'window', 'document', 'fetch'],
      'no-restricted-properties': ['error', { object: 'Math', property: 'random', message: 'Take a seeded stream.' }]
    }
  },
  {
    // Matrices and tableaux are indexed everywhere in these files; the index is in range by construction.
    files: ['src/lib/dynamics/**/*.ts', 'tests/**/*.ts', 'src/**/*.test.ts'],
    rules: { '@typescript-eslint/no-non-null-assertion': 'off' }
  }
);
