import js from '@eslint/js';
import a11y from 'eslint-plugin-jsx-a11y';
import reactHooks from 'eslint-plugin-react-hooks';
import prettier from 'eslint-config-prettier';
import ts from 'typescript-eslint';

const untracedWrites = ['nativeUpdate', 'nativeDelete', 'nativeInsert', 'upsert', 'upsertMany', 'insertMany'];

export default ts.config(
  { ignores: ['dist/', '.data/', 'coverage/', 'node_modules/'] },
  js.configs.recommended,
  {
    files: ['**/*.{ts,tsx}'],
    extends: [ts.configs.recommendedTypeChecked],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: {
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      // Express 5 forwards a rejected promise, so an async handler is right where a void one is typed.
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { arguments: false, attributes: false } }],
      // Functions that fulfil an async contract (jobs, loaders) need no await of their own.
      '@typescript-eslint/require-await': 'off',
    },
  },
  {
    files: ['**/*.tsx'],
    ...a11y.flatConfigs.recommended,
  },
  {
    files: ['frontend/**/*.{ts,tsx}'],
    plugins: { 'react-hooks': reactHooks },
    rules: reactHooks.configs.recommended.rules,
  },
  {
    files: ['analysis/**/*.ts'],
    ignores: ['**/*.test.ts', 'analysis/numerics/**', 'analysis/cli/**'],
    rules: {
      'no-restricted-imports': ['error', { patterns: [{ regex: '^[^.]', message: 'analysis imports only itself, by relative paths.' }] }],
    },
  },
  {
    files: ['backend/modules/**/*.ts'],
    rules: {
      'no-restricted-syntax': [
        'error',
        {
          selector: `CallExpression[callee.property.name=/^(${untracedWrites.join('|')})$/]`,
          message: 'Writes without a change set leave no trail: change entities inside act().',
        },
      ],
    },
  },
  {
    files: ['**/*.{js,mjs,cjs}'],
    languageOptions: { globals: { process: 'readonly', console: 'readonly', module: 'writable', URL: 'readonly', setTimeout: 'readonly' } },
  },
  prettier,
);
