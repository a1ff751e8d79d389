import eslint from '@eslint/js';
import angular from 'angular-eslint';
import { defineConfig, globalIgnores } from 'eslint/config';
import tseslint from 'typescript-eslint';
import { directions } from './eslint.directions.js';

/** What the project asks of all TypeScript, beyond typescript-eslint's strict sets. */
const everywhere = {
  '@typescript-eslint/consistent-type-imports': [
    'error',
    { fixStyle: 'inline-type-imports', disallowTypeAnnotations: false },
  ],
  // A static parser of numbers and of one field classes are fine; so are components without a body.
  '@typescript-eslint/no-extraneous-class': ['error', { allowWithDecorator: true }],
  '@typescript-eslint/no-unused-vars': [
    'error',
    {
      argsIgnorePattern: '^_',
      varsIgnorePattern: '^_',
      destructuredArrayIgnorePattern: '^_',
      ignoreRestSiblings: true,
    },
  ],
  '@typescript-eslint/switch-exhaustiveness-check': ['error', { considerDefaultExhaustiveForUnions: true }],
  // Handlers of events and sockets may be async where the rejection is handled inside.
  '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { arguments: false, attributes: false } }],
  // Angular's validators and template state are called unbound by design.
  '@typescript-eslint/unbound-method': ['error', { ignoreStatic: true }],
  '@typescript-eslint/no-confusing-void-expression': ['error', { ignoreArrowShorthand: true }],
  '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true }],
  // Strings are spread into code points on purpose.
  '@typescript-eslint/no-misused-spread': 'off',
  // `async` also turns what is thrown into a rejection, which a promise's caller expects.
  '@typescript-eslint/require-await': 'off',
  '@typescript-eslint/no-unnecessary-type-parameters': 'off',
  // `== null` means neither null nor undefined.
  eqeqeq: ['error', 'always', { null: 'ignore' }],
  'no-console': 'error',
};

export default defineConfig(
  globalIgnores([
    'dist/',
    'data/',
    'coverage/',
    'migrations/',
    'node_modules/',
    'playwright-report/',
    'test-results/',
    '.angular/',
  ]),
  {
    files: ['**/*.ts'],
    extends: [eslint.configs.recommended, tseslint.configs.strictTypeChecked, tseslint.configs.stylisticTypeChecked],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    linterOptions: { reportUnusedDisableDirectives: 'error' },
    rules: everywhere,
  },
  {
    files: ['src/**/*.ts'],
    extends: [angular.configs.tsRecommended],
    processor: angular.processInlineTemplates,
    rules: {
      '@angular-eslint/component-selector': ['error', { type: 'element', prefix: 'app', style: 'kebab-case' }],
      '@angular-eslint/directive-selector': ['error', { type: 'attribute', prefix: 'app', style: 'camelCase' }],
      '@angular-eslint/prefer-on-push-component-change-detection': 'error',
      '@angular-eslint/prefer-signals': 'error',
    },
  },
  {
    files: ['src/**/*.html'],
    extends: [angular.configs.templateRecommended, angular.configs.templateAccessibility],
    rules: { '@angular-eslint/template/prefer-control-flow': 'error' },
  },
  {
    // Loops over arrays of numbers and over tokens know their bounds.
    files: ['server/{optics,keys,checks,statistics}/**/*.ts', 'shared/reading/**/*.ts', 'bench/**/*.ts'],
    rules: { '@typescript-eslint/no-non-null-assertion': 'off' },
  },
  {
    // Functions of the mathematics library stand alone; it only types them as methods.
    files: ['server/keys/**/*.ts'],
    rules: { '@typescript-eslint/unbound-method': 'off' },
  },
  {
    files: ['**/*.spec.ts', '**/testing/**/*.ts', 'e2e/**/*.ts'],
    rules: {
      // What a test has just made is known to be there, and bodies of responses are looked at as they come.
      '@typescript-eslint/no-non-null-assertion': 'off',
      '@typescript-eslint/no-unsafe-argument': 'off',
      '@typescript-eslint/no-unsafe-assignment': 'off',
      '@typescript-eslint/no-unsafe-call': 'off',
      '@typescript-eslint/no-unsafe-member-access': 'off',
      '@typescript-eslint/no-unsafe-return': 'off',
      '@typescript-eslint/unbound-method': 'off',
    },
  },
  {
    // As a namespace, what is not used of it (its languages above all) stays out of the page: 53 kB compressed.
    files: ['src/**/*.ts', 'shared/**/*.ts'],
    rules: {
      'no-restricted-syntax': [
        'error',
        {
          selector: "ImportDeclaration[source.value='zod'] ImportSpecifier",
          message: "Write: import * as z from 'zod'",
        },
      ],
    },
  },
  {
    // Parts that exist in one test only.
    files: ['src/**/*.spec.ts'],
    rules: { '@angular-eslint/prefer-on-push-component-change-detection': 'off' },
  },
  {
    // Programs of the command line speak through the console; so does a page that cannot even begin.
    files: ['scripts/**', 'bench/**/*.ts', 'demo/**/*.ts', 'server/**/fuzz/**/*.ts', 'src/main.ts'],
    rules: { 'no-console': 'off' },
  },
  {
    files: ['**/*.mjs', '**/*.js'],
    extends: [eslint.configs.recommended],
    languageOptions: {
      globals: Object.fromEntries(
        [
          'console',
          'process',
          'URL',
          'setTimeout',
          'clearTimeout',
          'setInterval',
          'clearInterval',
          'fetch',
          'Buffer',
        ].map((name) => [name, 'readonly']),
      ),
    },
    rules: { eqeqeq: 'error', 'no-unused-vars': ['error', { argsIgnorePattern: '^_' }] },
  },
  directions,
);
