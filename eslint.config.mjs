import js from '@eslint/js';
import boundaries from 'eslint-plugin-boundaries';
import astro from 'eslint-plugin-astro';
import tseslint from 'typescript-eslint';

const layer = (type, pattern) => ({ type, pattern });
const may = (from, ...to) => ({
  from: { element: { type: from } },
  allow: [{ to: { element: { type: to } } }, { to: { file: { categories: 'format' } } }],
});

export default tseslint.config(
  { ignores: ['dist', 'node_modules', '.astro', 'db/data', 'coverage'] },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  ...astro.configs.recommended,
  {
    files: ['src/**/*.{ts,tsx,astro}'],
    plugins: { boundaries },
    settings: {
      'import/resolver': { node: { extensions: ['.ts', '.tsx', '.astro', '.mjs', '.js'] } },
      // How numbers, money and dates are worded: one pure file for every layer.
      'boundaries/files': [{ category: 'format', pattern: 'src/components/ui/{format,setting-words}.ts' }],
      'boundaries/elements': [
        layer('core', 'src/core'),
        layer('schemas', 'src/schemas'),
        layer('policies', 'src/server/policies'),
        layer('models', 'src/server/models'),
        layer('db', 'src/server/db'),
        layer('presenters', 'src/server/presenters'),
        layer('services', 'src/server/services'),
        layer('server', 'src/server'),
        layer('client', 'src/client'),
        layer('components', 'src/components'),
        layer('layouts', 'src/layouts'),
        layer('integrations', 'src/integrations'),
        layer('pages', 'src/pages'),
      ],
    },
    rules: {
      'boundaries/dependencies': [
        'error',
        {
          default: 'disallow',
          policies: [
            may('core', 'core'),
            may('schemas', 'schemas', 'core'),
            may('policies', 'policies', 'schemas'),
            may('db', 'db', 'server'),
            may('models', 'models', 'db', 'schemas', 'core', 'policies'),
            may('presenters', 'presenters', 'models', 'schemas', 'core', 'policies'),
            may('services', 'services', 'policies', 'presenters', 'models', 'db', 'server', 'schemas', 'core'),
            may(
              'server',
              'server',
              'services',
              'policies',
              'presenters',
              'models',
              'db',
              'schemas',
              'core',
              'components',
            ),
            may('client', 'client', 'schemas', 'core'),
            may('components', 'components', 'client', 'schemas', 'core'),
            may('layouts', 'layouts', 'components', 'schemas', 'core', 'client'),
            may('integrations', 'integrations'),
            may('pages', 'pages', 'layouts', 'components', 'services', 'server', 'schemas', 'core', 'client'),
          ],
        },
      ],
    },
  },
  {
    files: ['src/core/**/*.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        { patterns: ['node:*', 'fs', 'path', 'sequelize', 'express', 'astro*', 'react*'] },
      ],
      'no-restricted-globals': ['error', 'process', 'fetch', 'setTimeout', 'setInterval', 'window', 'document'],
      'no-restricted-properties': [
        'error',
        { object: 'Math', property: 'random', message: 'Sampling in the core takes a seed.' },
        { object: 'Date', property: 'now', message: 'The core has no clock.' },
      ],
    },
  },
  {
    files: ['src/**/*.{ts,tsx,astro}'],
    ignores: ['src/server/env.ts', 'src/server/db/tx.ts'],
    rules: {
      'no-restricted-syntax': [
        'error',
        {
          selector: "MemberExpression[object.name='process'][property.name='env']",
          message: 'Only src/server/env.ts reads the environment.',
        },
        {
          selector: "CallExpression[callee.property.name='transaction']",
          message: 'Use inTx(fn) from src/server/db/tx.ts: one gate for all transactions.',
        },
        {
          selector: 'CallExpression[callee.property.name=/^(bulkCreate|upsert)$/]',
          message: 'Bulk writes leave no trail row; create records one by one inside inTx.',
        },
      ],
    },
  },
  {
    rules: {
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/no-explicit-any': 'error',
      'no-undef': 'off',
    },
  },
);
