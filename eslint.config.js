import globals from 'globals';
import importX from 'eslint-plugin-import-x';
import { createTypeScriptImportResolver } from 'eslint-import-resolver-typescript';
import pluginVue from 'eslint-plugin-vue';
import tseslint from 'typescript-eslint';

/** Kernels that the browser runs too; the client imports these files and no other part of the engine. */
const kernels = ['geometry/**', 'fit/**', 'gangrun/{layout,place-geometry,sheet-frame,strips}.ts', 'reading/grouping.ts', 'template/document.ts', 'template/page-svg.ts', '**/types.ts', 'control.ts'];

const forbid = (target, from, message, except) => ({ target, from, message, ...(except ? { except } : {}) });

export default tseslint.config(
  { ignores: ['dist/**', 'node_modules/**', '.local/**', 'coverage/**'] },
  ...tseslint.configs.recommended,
  ...pluginVue.configs['flat/essential'],
  {
    files: ['**/*.ts', '**/*.vue', '**/*.mjs', '**/*.js'],
    languageOptions: { globals: { ...globals.node, ...globals.browser }, parserOptions: { parser: tseslint.parser } },
    plugins: { 'import-x': importX },
    settings: { 'import-x/resolver-next': [createTypeScriptImportResolver({ project: ['server/tsconfig.json', 'src/tsconfig.json'] })] },
    rules: {
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': 'error',
      'no-console': 'error',
      'vue/multi-word-component-names': 'off',
      'import-x/no-cycle': ['error', { ignoreExternal: true }],
      'import-x/no-restricted-paths': [
        'error',
        {
          zones: [
            forbid('./server/engine', './server', 'The engine knows nobody.', ['./engine']),
            forbid('./server/engine', './src', 'The engine knows nobody.'),
            forbid('./server', './src', 'The server does not import the client.'),
            forbid('./src', './server', 'The client imports the contract (types only) and the browser-safe kernels.', ['./contract', './engine']),
            // A pattern on both sides: only then are the exceptions read as patterns too.
            forbid('./src', './server/engine/**/*', 'Only the browser-safe kernels, file by file.', kernels.map((k) => `**/server/engine/${k}`)),
            forbid('./src/components', './src/views', 'views → components, never back.'),
            forbid('./src/composables', './src/components', 'components → composables, never back.'),
            forbid('./src/stores', ['./src/components', './src/views', './src/composables'], 'Stores know only the api.'),
            forbid('./src/api', ['./src/components', './src/views', './src/composables', './src/stores'], 'The api knows only the contract.'),
            forbid('./server/contract', ['./server/features', './server/db', './server/middleware'], 'The contract stands alone.'),
            forbid('./server/features/account', './server/features', 'A feature may use those to its left.', ['./account']),
            forbid('./server/features/studio', './server/features', 'A feature may use those to its left.', ['./account', './studio']),
            ...['stamp-sets', 'dies', 'gear'].map((f) => forbid(`./server/features/${f}`, './server/features', 'A feature may use those to its left.', ['./account', './studio', './stamp-sets', './dies', './gear'])),
            forbid('./server/features/batches', ['./server/features/bench', './server/features/sharing', './server/features/cards'], 'A feature may use those to its left.'),
          ],
        },
      ],
    },
  },
  { files: ['server/features/**/*.routes.ts'], rules: { 'no-restricted-imports': ['error', { patterns: [{ group: ['**/*.queries.ts', '**/db/**'], message: 'routes → service → queries → db' }] }] } },
  { files: ['server/features/**/*.service.ts'], rules: { 'no-restricted-imports': ['error', { patterns: [{ group: ['express'], message: 'A service sees no req and no res.' }] }] } },
  { files: ['server/local/**', 'tests/benchmarks/**'], rules: { 'no-console': 'off' } },
);
