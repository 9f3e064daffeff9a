import js from '@eslint/js';
import astro from 'eslint-plugin-astro';
import hooks from 'eslint-plugin-react-hooks';
import { defineConfig } from 'eslint/config';
import tseslint from 'typescript-eslint';

const environmentMessage = 'Read settings through src/server/env.ts, where they are validated once.';

export default defineConfig(
  { ignores: ['dist/**', '.astro/**', '.data/**', 'node_modules/**', 'tests/golden/**', 'test-results/**'] },
  js.configs.recommended,
  ...tseslint.configs.strict,
  ...astro.configs.recommended,
  {
    files: ['**/*.ts', '**/*.tsx'],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    plugins: { 'react-hooks': hooks },
    rules: {
      ...hooks.configs.recommended.rules,
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: false }],
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/no-non-null-assertion': 'error',
      'no-eval': 'error',
      'no-implied-eval': 'error',
      'no-new-func': 'error',
    },
  },
  {
    files: ['src/**/*.{ts,tsx,astro}', 'db/**/*.ts'],
    ignores: ['src/server/env.ts', 'src/launch/**'],
    rules: {
      'no-restricted-properties': [
        'error',
        { object: 'process', property: 'env', message: environmentMessage },
      ],
    },
  },
  {
    // Advisories of Astro 5 that will get no fix: these constructs stay out of the house.
    files: ['**/*.astro'],
    rules: {
      'astro/no-set-html-directive': 'error',
      'no-restricted-syntax': [
        'error',
        {
          selector: "JSXNamespacedName[namespace.name='define']",
          message: 'define:vars lets text break out of the script (advisory GHSA-j687-52p2-xcff).',
        },
        {
          selector: "JSXNamespacedName[namespace.name='server']",
          message: 'server:defer opens an endpoint without a body limit (CVE-2026-29772).',
        },
        {
          selector: "JSXNamespacedName[namespace.name='transition']",
          message: 'transition:* is open to injection in Astro 5 (GHSA-7pw4-f3q4-r2p2).',
        },
        {
          selector: 'JSXSpreadAttribute',
          message: 'Spread attributes can carry user keys into the markup (CVE-2026-54298).',
        },
        {
          selector: "JSXAttribute[name.name='slot'][value.type='JSXExpressionContainer']",
          message: 'Dynamic slot names are not escaped (CVE-2026-50146).',
        },
      ],
    },
  },
  {
    // Ambient declarations have no imports of their own: types are named where they are used.
    files: ['**/*.d.ts'],
    rules: { '@typescript-eslint/consistent-type-imports': 'off' },
  },
  {
    files: ['**/*.mjs', '**/*.cjs'],
    languageOptions: {
      globals: {
        module: 'writable',
        process: 'readonly',
        console: 'readonly',
        URL: 'readonly',
        setTimeout: 'readonly',
        clearTimeout: 'readonly',
      },
    },
  },
);
