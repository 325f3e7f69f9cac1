import angular from 'angular-eslint';
import globals from 'globals';
import tseslint from 'typescript-eslint';

const SERVER_TS = ['api/**/*.ts', 'db/**/*.ts', 'worker/**/*.ts', 'fixtures/**/*.ts', 'test/**/*.ts'];
const UI_TS = ['ui/**/*.ts'];
const TESTS = ['**/*.spec.ts', 'test/**/*.ts', '**/*.contract-suite.ts', '**/*.harness.ts'];

/** A test that does not run proves nothing, and one that runs alone hides the others. */
const IDLE_TESTS = ['it', 'test', 'describe'].flatMap((object) =>
  ['only', 'skip', 'todo', 'failing'].map((property) => ({ object, property, message: 'Every test runs, always.' })),
);
const IDLE_GLOBALS = ['xit', 'xtest', 'xdescribe', 'fit', 'fdescribe'].map((name) => ({ name, message: 'Every test runs, always.' }));

/** What differs in the last digit from one machine to the next, or from one day to the next, moves prices. */
const PORTABLE = [
  {
    selector: "MemberExpression[object.name='Math']:not([computed=false][property.name=/^(sqrt|min|max|floor|abs|imul)$/])",
    message: 'Only sqrt, min, max, floor, abs and imul give the same bits everywhere; for the rest take @stdlib.',
  },
  { selector: "VariableDeclarator[init.name='Math']", message: 'Take the functions of Math one by one, where the rule can see them.' },
  { selector: "BinaryExpression[operator='**']", message: 'Powers differ in the last digit between machines; multiply, or take @stdlib.' },
  { selector: "AssignmentExpression[operator='**=']", message: 'Powers differ in the last digit between machines; multiply.' },
  { selector: "CallExpression[callee.property.name='toLocaleString']", message: 'The engine knows no locale.' },
  { selector: 'ImportExpression', message: 'The engine loads nothing while it runs.' },
];
const NOT_PURE = ['Date', 'process', 'require', 'performance', 'setTimeout', 'setInterval', 'crypto', 'fetch', 'Intl', 'console', 'globalThis'];

export default tseslint.config(
  { ignores: ['node_modules/', 'dist/', '.local/', '.angular/', 'coverage/', 'fonts/'] },
  {
    // No rule is switched off from within a file: a rule that is wrong is changed here, for all.
    linterOptions: { noInlineConfig: true, reportUnusedDisableDirectives: 'error' },
    rules: { 'max-lines': ['error', { max: 300, skipBlankLines: true, skipComments: true }] },
  },
  {
    files: ['**/*.{js,mjs,cjs}'],
    languageOptions: { globals: globals.node },
    rules: { 'no-undef': 'error', 'no-unused-vars': 'error', 'prefer-const': 'error', eqeqeq: 'error', 'no-console': 'error' },
  },
  {
    files: [...SERVER_TS, ...UI_TS],
    extends: [...tseslint.configs.strict, ...tseslint.configs.recommendedTypeChecked],
    languageOptions: {
      parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname, emitDecoratorMetadata: true, experimentalDecorators: true },
    },
    rules: {
      'no-console': 'error',
      eqeqeq: 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_', ignoreRestSiblings: true }],
      'no-restricted-properties': ['error', ...IDLE_TESTS],
      'no-restricted-globals': ['error', ...IDLE_GLOBALS],
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports', disallowTypeAnnotations: false }],
      '@typescript-eslint/ban-ts-comment': ['error', { 'ts-expect-error': true, 'ts-ignore': true, 'ts-nocheck': true, 'ts-check': false }],
      '@typescript-eslint/switch-exhaustiveness-check': ['error', { considerDefaultExhaustiveForUnions: true }],
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true, allowBoolean: true, allowNullish: false }],
      // An Angular component or a migration is a class because its framework says so.
      '@typescript-eslint/no-extraneous-class': ['error', { allowWithDecorator: true }],
      // A port's adapter may have nothing to await where another has.
      '@typescript-eslint/require-await': 'off',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { arguments: false, attributes: false } }],
    },
  },
  {
    files: TESTS,
    rules: {
      // jest's matchers and mocks are loose in their types by design.
      '@typescript-eslint/no-unsafe-assignment': 'off',
      '@typescript-eslint/no-unsafe-member-access': 'off',
      '@typescript-eslint/no-unsafe-argument': 'off',
      '@typescript-eslint/no-unsafe-call': 'off',
      '@typescript-eslint/no-unsafe-return': 'off',
      '@typescript-eslint/unbound-method': 'off',
      '@typescript-eslint/no-non-null-assertion': 'off',
    },
  },
  {
    files: ['worker/engine/**/*.ts'],
    ignores: ['**/*.spec.ts'],
    rules: {
      // An index that a loop has bounded is sure, and a check in the innermost loop costs.
      '@typescript-eslint/no-non-null-assertion': 'off',
      'no-restricted-syntax': ['error', ...PORTABLE],
      'no-restricted-globals': ['error', ...NOT_PURE.map((name) => ({ name, message: 'The engine is pure: no clock, no input or output.' }))],
    },
  },
  {
    files: UI_TS,
    extends: [...angular.configs.tsRecommended],
    processor: angular.processInlineTemplates,
    rules: {
      // Angular's validators are static methods that are handed over by name.
      '@typescript-eslint/unbound-method': 'off',
      '@angular-eslint/component-class-suffix': 'off',
      '@angular-eslint/directive-class-suffix': 'off',
      '@angular-eslint/prefer-on-push-component-change-detection': 'error',
      '@angular-eslint/no-inputs-metadata-property': 'error',
    },
  },
  {
    files: ['ui/**/*.html'],
    extends: [...angular.configs.templateRecommended, ...angular.configs.templateAccessibility],
    rules: {
      '@angular-eslint/template/prefer-control-flow': 'error',
      // A static style attribute is blocked by the content security policy.
      '@angular-eslint/template/no-inline-styles': ['error', { allowNgStyle: false, allowBindToStyle: true }],
    },
  },
);
