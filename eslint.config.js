// The house's rules of code (DEVELOPERS.md). Which module may import which is .dependency-cruiser.mjs's part.

import js from '@eslint/js'
import tanstackQuery from '@tanstack/eslint-plugin-query'
import reactHooks from 'eslint-plugin-react-hooks'
import globals from 'globals'
import tseslint from 'typescript-eslint'
import { house } from './.dependency-cruiser.mjs'

const typescript = ['**/*.ts', '**/*.tsx']
const benches = ['shared/bench/**', 'api/src/bench/**']
const tests = ['**/*.spec.ts', '**/*.spec.tsx', '**/*.test-support.ts', '**/testing/**', ...benches, 'e2e/**']
const configurations = ['**/*.config.ts', '*.config.js', '.dependency-cruiser.mjs']

const noDefaultExport = {
  selector: 'ExportDefaultDeclaration',
  message: 'Export by name: a name is found by search and kept by renaming.',
}
const noForwardRef = {
  selector: "CallExpression[callee.name='forwardRef']",
  message: 'Two providers that need each other are one, or want a third.',
}
// A constructor names what it is given; everything else takes an object before it takes five arguments.
const noLongCall = {
  selector:
    ':matches(FunctionDeclaration, ArrowFunctionExpression, MethodDefinition[kind="method"] > FunctionExpression)[params.length>4]',
  message: 'Take one object with named parts.',
}
const always = [noDefaultExport, noForwardRef, noLongCall]
const noClock = [
  {
    selector: "NewExpression[callee.name='Date'][arguments.length=0]",
    message: 'Ask the clock (api/src/platform, web/src/lib), or take the time as an argument.',
  },
  {
    selector: "CallExpression[callee.object.name='Date'][callee.property.name='now']",
    message: 'Ask the clock (api/src/platform, web/src/lib), or take the time as an argument.',
  },
  {
    selector: "CallExpression[callee.name='dayjs'][arguments.length=0]",
    message: 'Ask the clock (web/src/lib), or take the time as an argument.',
  },
]

/** Promises dropped on the floor, comparisons that cannot be: what only types can tell. */
const rulesByType = {
  '@typescript-eslint/await-thenable': 'error',
  '@typescript-eslint/no-floating-promises': 'error',
  '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
  '@typescript-eslint/only-throw-error': ['error', { allowThrowingUnknown: true }],
  '@typescript-eslint/prefer-promise-reject-errors': 'error',
  '@typescript-eslint/switch-exhaustiveness-check': ['error', { considerDefaultExhaustiveForUnions: true }],
}

export default tseslint.config(
  {
    ignores: [
      '**/dist/',
      '**/node_modules/',
      '.data/',
      '**/pictures/',
      '**/test-results/',
      '**/*.gen.ts',
      'fixtures/',
    ],
  },
  { linterOptions: { reportUnusedDisableDirectives: 'error' } },
  js.configs.recommended,
  {
    rules: {
      eqeqeq: 'error',
      // Readers of uploads look for such characters.
      'no-control-regex': 'off',
      'no-console': 'error',
      'object-shorthand': 'error',
      'prefer-const': 'error',
      'max-lines': ['error', { max: 400, skipBlankLines: true, skipComments: true }],
      'no-restricted-syntax': ['error', ...always],
    },
  },
  {
    files: typescript,
    extends: [...tseslint.configs.strict],
    rules: {
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports' }],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      // An endpoint without an answer gives back nothing, and its type says so.
      '@typescript-eslint/no-invalid-void-type': 'off',
      // Nest's modules and injected services are classes with nothing, or only a constructor, in them.
      '@typescript-eslint/no-extraneous-class': ['error', { allowWithDecorator: true }],
    },
  },
  {
    files: ['{shared,api,web}/src/**/*.{ts,tsx}', 'e2e/**/*.ts'],
    ignores: configurations,
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: rulesByType,
  },
  {
    files: ['{shared,api,web}/src/**/*.{ts,tsx}'],
    ignores: [...house.clocks, ...tests],
    rules: { 'no-restricted-syntax': ['error', ...always, ...noClock] },
  },
  {
    files: ['web/src/**/*.{ts,tsx}'],
    extends: [tanstackQuery.configs['flat/recommended']],
    plugins: { 'react-hooks': reactHooks },
    languageOptions: { globals: globals.browser },
    rules: { 'react-hooks/rules-of-hooks': 'error', 'react-hooks/exhaustive-deps': 'error' },
  },
  // The one place where keys are made: from an endpoint's name, which stands for the endpoint.
  { files: ['web/src/lib/queries.ts'], rules: { '@tanstack/query/exhaustive-deps': 'off' } },
  { files: ['**/*.mjs', '*.js', 'api/**', 'e2e/**'], languageOptions: { globals: globals.node } },
  {
    // Commands talk to the person who typed them.
    files: [
      'sql/cluster/**',
      'e2e/**',
      ...benches,
      '**/testing/**',
      'api/src/*.ts',
      'api/src/platform/database/*.ts',
    ],
    rules: { 'no-console': 'off' },
  },
  // Playwright finds out what a fixture needs from its pattern, also where that is nothing.
  {
    files: ['e2e/support/**'],
    rules: { 'no-empty-pattern': ['error', { allowObjectPatternsAsParameters: true }] },
  },
  // Who reads these files demands a default export: configurations, threads of the worker pool, set-ups, types.
  {
    files: [...configurations, '**/*-worker.ts', '**/global-*.ts', '**/template-database.ts', '**/*.d.ts'],
    rules: { 'no-restricted-syntax': 'off' },
  },
  // A table of cases is as long as it is.
  { files: tests, rules: { 'max-lines': 'off' } },
)
