/** Faults that the compiler does not see, and the house's own rules with what to do instead. */
import js from '@eslint/js';
import { defineConfig, globalIgnores } from 'eslint/config';
import prettier from 'eslint-config-prettier';
import hooks from 'eslint-plugin-react-hooks';
import globals from 'globals';
import typescript from 'typescript-eslint';

const refusal = {
  selector: "ThrowStatement > NewExpression[callee.name='Error']",
  message:
    'Throw a PennyweightError (#contract/error.ts) with a code and one sentence: what was wrong, where, what to do next.',
};

/** Import rules that dependency-cruiser does not know: node's own modules. */
function withoutNode(modules, message) {
  return {
    'no-restricted-imports': [
      'error',
      {
        paths: modules.flatMap((name) => [
          { name, message },
          { name: `node:${name}`, message },
        ]),
      },
    ],
  };
}

const files = ['fs', 'fs/promises'];
const processes = ['child_process', 'worker_threads', 'cluster'];

export default defineConfig(
  globalIgnores(['dist/', 'storage/', 'drizzle/', 'tests/browser/screenshots/']),
  js.configs.recommended,
  {
    rules: {
      'no-restricted-syntax': ['error', refusal],
      'no-warning-comments': ['error', { terms: ['todo', 'fixme', 'xxx', 'hack'], location: 'anywhere' }],
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      'no-constant-condition': ['error', { checkLoops: false }],
      'no-promise-executor-return': 'off',
      'no-param-reassign': 'error',
      'no-empty': ['error', { allowEmptyCatch: false }],
    },
  },
  {
    files: ['**/*.js', '**/*.cjs', '**/*.mjs'],
    languageOptions: { globals: globals.node },
  },
  {
    files: ['**/*.ts', '**/*.tsx'],
    extends: [typescript.configs.recommended, typescript.configs.stylistic],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: {
      // Promises that nobody waits for lose their errors and outlive their transaction.
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': [
        'error',
        { checksVoidReturn: { attributes: false, arguments: false } },
      ],
      '@typescript-eslint/await-thenable': 'error',
      '@typescript-eslint/only-throw-error': 'error',
      '@typescript-eslint/switch-exhaustiveness-check': ['error', { considerDefaultExhaustiveForUnions: true }],
      '@typescript-eslint/consistent-type-imports': 'error',
    },
  },
  {
    files: ['src/**/*.{ts,tsx}', 'tests/web/**/*.{ts,tsx}'],
    extends: [hooks.configs.flat.recommended],
    languageOptions: { globals: globals.browser },
    // Tells only that the compiler for React, which we do not use, would leave a component with a table alone.
    rules: { 'react-hooks/incompatible-library': 'off' },
  },
  {
    files: ['src/**/*.{ts,tsx}'],
    rules: {
      'no-restricted-imports': [
        'error',
        {
          patterns: [
            { group: ['node:*'], message: 'Pages run in the browser: ask the server through a route of #contract.' },
            {
              group: ['**/server/*'],
              message: 'Import from #contract: the browser shares nothing else with the server.',
            },
          ],
        },
      ],
      'no-restricted-globals': [
        'error',
        { name: 'fetch', message: 'Send requests through src/api, which knows addresses and errors.' },
      ],
    },
  },
  {
    files: ['src/api/**/*.ts'],
    rules: { 'no-restricted-globals': 'off' },
  },
  {
    files: ['server/engine/**/*.ts'],
    rules: {
      'no-restricted-properties': [
        'error',
        { object: 'Math', property: 'random', message: 'The engine is repeatable: take a seed and use it.' },
        { object: 'Date', property: 'now', message: 'The engine knows no clock: take the time as a parameter.' },
        { object: 'performance', property: 'now', message: 'The engine knows no clock: measure in the caller.' },
      ],
      'no-restricted-globals': [
        'error',
        { name: 'process', message: 'The engine knows no surroundings: take it as a parameter.' },
      ],
    },
  },
  {
    files: ['server/{http,services,access,db}/**/*.ts'],
    ignores: ['server/db/migrate.ts'],
    rules: withoutNode(
      [...files, ...processes],
      'Archives and other bytes go through server/storage; other processes are started by server/reading or server/jobs.',
    ),
  },
  prettier,
);
