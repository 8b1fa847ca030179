import js from '@eslint/js';
import boundaries from 'eslint-plugin-boundaries';
import astro from 'eslint-plugin-astro';
import tseslint from 'typescript-eslint';

const layer = (type, pattern, mode = 'folder') => ({ type, pattern, mode });

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
      'boundaries/element-types': [
        'error',
        {
          default: 'disallow',
          rules: [
            { from: 'core', allow: ['core'] },
            { from: 'schemas', allow: ['schemas', 'core'] },
            { from: 'policies', allow: ['policies', 'schemas'] },
            { from: 'db', allow: ['db', 'server'] },
            { from: 'models', allow: ['models', 'db', 'schemas', 'core', 'policies'] },
            { from: 'presenters', allow: ['presenters', 'models', 'schemas', 'core', 'policies'] },
            { from: 'services', allow: ['services', 'policies', 'presenters', 'models', 'db', 'server', 'schemas', 'core'] },
            {
              from: 'server',
              allow: ['server', 'services', 'policies', 'presenters', 'models', 'db', 'schemas', 'core', 'components'],
            },
            { from: 'client', allow: ['client', 'schemas', 'core'] },
            { from: 'components', allow: ['components', 'client', 'schemas', 'core'] },
            { from: 'layouts', allow: ['layouts', 'components', 'schemas', 'core', 'client'] },
            { from: 'integrations', allow: ['integrations'] },
            { from: 'pages', allow: ['pages', 'layouts', 'components', 'services', 'server', 'schemas', 'core', 'client'] },
          ],
        },
      ],
    },
  },
  {
    files: ['src/core/**/*.ts'],
    rules: {
      'no-restricted-imports': ['error', { patterns: ['node:*', 'fs', 'path', 'sequelize', 'express', 'astro*', 'react*'] }],
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
          selector: "CallExpression[callee.property.name=/^(bulkCreate|upsert)$/]",
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
