import { createNodeResolver, importX } from 'eslint-plugin-import-x';
import tseslint from 'typescript-eslint';
import { importDirections } from './scripts/lint/import-directions.mjs';

const visviva = { rules: { 'import-directions': importDirections } };

export default tseslint.config(
  {
    ignores: [
      '**/node_modules/', 'dist/', '.artifacts/', '.vscode-test/', 'tests/fixtures/', 'tests/**/fixtures/', 'tests/editor/workspace/',
      'sample-workspace/',
    ],
  },
  {
    files: ['**/*.ts', '**/*.mts', '**/*.tsx'],
    extends: [...tseslint.configs.recommended],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    plugins: { 'import-x': importX, visviva },
    settings: {
      'import-x/extensions': ['.ts', '.tsx'],
      'import-x/parsers': { '@typescript-eslint/parser': ['.ts', '.tsx'] },
      'import-x/resolver-next': [createNodeResolver({ extensions: ['.ts', '.tsx', '.js', '.json'] })],
    },
    rules: {
      'visviva/import-directions': 'error',
      'import-x/no-cycle': ['error', { ignoreExternal: true }],
      'import-x/no-self-import': 'error',
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': 'error',
      '@typescript-eslint/await-thenable': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      eqeqeq: ['error', 'always'],
      '@typescript-eslint/no-this-alias': 'off',
    },
  },
  {
    files: ['{server,client,shared}/src/**/*.ts'],
    rules: {
      'max-lines': ['error', { max: 450 }],
      'no-eval': 'error',
      'no-implied-eval': 'error',
      'no-new-func': 'error',
    },
  },
  {
    // The core is pure: the same input gives the same answer, and nothing outside is touched.
    files: ['shared/src/**/*.ts', 'server/src/**/*.ts'],
    ignores: ['server/src/{host,lsp,cli}/**'],
    rules: {
      'no-restricted-globals': [
        'error',
        ...['process', 'fetch', 'console', 'Buffer', 'setTimeout', 'setInterval', 'setImmediate', '__dirname'].map((name) => ({
          name,
          message: 'The core does no input or output; the host, the server and the command do.',
        })),
      ],
      'no-restricted-properties': [
        'error',
        { object: 'Math', property: 'random', message: 'Samples come from a fixed seed.' },
        { object: 'Date', property: 'now', message: 'Take the clock from the budget.' },
      ],
    },
  },
  {
    files: ['**/*.mjs', '**/*.cjs', '**/*.js'],
    extends: [tseslint.configs.disableTypeChecked],
    rules: { eqeqeq: ['error', 'always'] },
  },
);
