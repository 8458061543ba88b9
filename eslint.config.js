// What: the laws of the house that a linter can see. Each message says where the thing belongs instead.
// Must not: judge taste (Prettier does the layout) or let a file out by a comment without a reason.
const expo = require('eslint-config-expo/flat');
const tseslint = require('typescript-eslint');

const code = ['app', 'components', 'shared', 'server', 'db'].map((folder) => `${folder}/**/*.{ts,tsx}`);

const clock = [
  {
    selector:
      "MemberExpression[object.name='Date'][property.name='now'], NewExpression[callee.name='Date'][arguments.length=0], CallExpression[callee.name='Date']",
    message:
      'One clock: take the time from tx.now on the server, from components/runtime/clock.ts on a page, from an argument in shared/.',
  },
  {
    selector: "MemberExpression[object.name='performance'][property.name=/^(now|timeOrigin)$/]",
    message: 'The monotonic clock is read in components/runtime/clock.ts only.',
  },
];
const chance = {
  selector: "MemberExpression[object.name='Math'][property.name='random']",
  message: 'Chance is an argument (or node:crypto on the server), so that the same input gives the same answer.',
};
const environment = {
  selector:
    "MemberExpression[object.name='process'][property.name='env'], ImportDeclaration[source.value=/^(node:)?process$/]",
  message: 'Only server/env.ts reads the environment, where a missing or odd value stops the start.',
};
const colours = [
  {
    selector: 'Literal[value=/^#([0-9a-fA-F]{3,4}|[0-9a-fA-F]{6}|[0-9a-fA-F]{8})$/], Literal[value=/^(rgb|hsl)a?\\(/]',
    message: 'Colours live in components/ui/theme.ts, named by what they are for.',
  },
  {
    selector: 'TemplateElement[value.raw=/#[0-9a-fA-F]{6}|rgba?\\(|hsla?\\(/]',
    message: 'Colours live in components/ui/theme.ts, named by what they are for.',
  },
];
const spacedProperty =
  'Property[key.name=/^(padding|margin|gap|rowGap|columnGap|borderRadius|fontSize|lineHeight)([A-Z]|$)/]';
const spacing = {
  selector: `${spacedProperty} > Literal[raw=/^[1-9]/], ${spacedProperty} > UnaryExpression > Literal[raw=/^[1-9]/]`,
  message: 'Spacing, radius and type sizes live in components/ui/theme.ts: use space, radius or type from there.',
};
const sides = {
  selector:
    "Property[key.name=/^(margin|padding|border)(Left|Right)|^border(Top|Bottom)(Left|Right)Radius$/], Property[key.name='textAlign'] > Literal[value=/^(left|right)$/]",
  message: 'Say start and end instead of left and right: some languages run the other way.',
};
const reExported = 'ExportAllDeclaration, ExportNamedDeclaration[source]';
const barrels = {
  selector: `ExportAllDeclaration, Program:has(> ExportNamedDeclaration[source]):not(:has(> :not(${reExported}, ImportDeclaration)))`,
  message: 'No barrel files: they hide who imports whom. Import the file itself.',
};

/** One rule holds all bans on syntax, and a later block replaces it whole: each block lists what holds in its files. */
const ban = (...list) => ({ 'no-restricted-syntax': ['error', ...list.flat()] });

/** The rules that run the React compiler over each file: we do not compile by it, its `refs` took 66 props for refs, and it took a third of the time. */
const byReactCompiler = Object.fromEntries(
  expo
    .flatMap(({ rules = {} }) => Object.keys(rules))
    .filter((name) => name.startsWith('react-hooks/') && !/rules-of-hooks|exhaustive-deps/.test(name))
    .map((name) => [name, 'off']),
);

module.exports = [
  { ignores: ['dist/', '.rampwell/', '.expo/', 'coverage/', 'screens-out/', 'node_modules/', 'expo-env.d.ts'] },
  ...expo,
  { rules: byReactCompiler },
  { linterOptions: { reportUnusedDisableDirectives: 'error' } },
  {
    files: ['**/*.{ts,tsx}'],
    plugins: { '@typescript-eslint': tseslint.plugin },
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: __dirname } },
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-non-null-assertion': 'error',
      // Of the rules that ask the compiler, only these: no-misused-promises and await-thenable took three quarters of the time
      // (they want the type of every expression), and the compiler itself finds a promise used as a condition.
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/switch-exhaustiveness-check': ['error', { considerDefaultExhaustiveForUnions: true }],
      '@typescript-eslint/only-throw-error': 'error',
      '@typescript-eslint/prefer-promise-reject-errors': 'error',
      '@typescript-eslint/consistent-type-imports': [
        'error',
        { fixStyle: 'inline-type-imports', disallowTypeAnnotations: false },
      ],
      '@typescript-eslint/no-unused-vars': [
        'error',
        { argsIgnorePattern: '^_', varsIgnorePattern: '^_', caughtErrors: 'none' },
      ],
      '@typescript-eslint/ban-ts-comment': ['error', { 'ts-expect-error': 'allow-with-description' }],
      // The compiler sees these better and faster; a schema and its type may share a name.
      '@typescript-eslint/no-redeclare': 'off',
      'import/namespace': 'off',
      'import/no-duplicates': 'off',
      'import/no-unresolved': 'off',
      'import/named': 'off',
      'import/default': 'off',
      'import/no-named-as-default': 'off',
      'import/no-named-as-default-member': 'off',
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      'no-console': 'error',
      'no-var': 'error',
      'prefer-const': 'error',
    },
  },
  {
    files: code,
    rules: {
      '@typescript-eslint/consistent-type-assertions': ['error', { assertionStyle: 'never' }],
      ...ban(clock, chance, environment, colours, sides, barrels),
    },
  },
  { files: ['components/**/*.{ts,tsx}'], rules: ban(clock, chance, environment, colours, sides, barrels, spacing) },
  // A drawing has its own geometry; spacing between things on a screen has not.
  { files: ['components/**/pictures/**'], rules: ban(clock, chance, environment, colours, sides, barrels) },
  // A door may be one line that passes a screen on.
  { files: ['app/**/*.{ts,tsx}'], rules: ban(clock, chance, environment, colours, sides, spacing) },
  { files: ['components/ui/theme.ts'], rules: ban(clock, chance, environment, sides, barrels) },
  {
    files: ['server/clock.ts', 'db/queries/clock.ts', 'components/runtime/clock.ts'],
    rules: ban(chance, environment, colours, sides, barrels),
  },
  { files: ['server/env.ts'], rules: ban(clock, chance, colours, barrels) },
  {
    // An action loads, asks, writes; a number in it would be a decision.
    files: ['server/features/**/*.ts'],
    rules: { 'no-magic-numbers': ['error', { ignore: [0, 1, -1], ignoreArrayIndexes: true, enforceConst: false }] },
  },
  { files: ['server/**/*.ts'], rules: { 'react-hooks/rules-of-hooks': 'off' } },
  {
    files: ['tests/**/*.{ts,tsx}'],
    rules: {
      'no-restricted-syntax': 'off',
      // A test says what a file with random names must not; Jest's own matchers are checked by their types.
      'react/display-name': 'off',
      '@typescript-eslint/no-require-imports': 'off',
    },
  },
  {
    files: ['scripts/**/*.mjs', 'tests/**/*.{mjs,cjs}', '*.{js,cjs,ts}', '.*.cjs'],
    languageOptions: {
      globals: {
        process: 'readonly',
        console: 'readonly',
        Buffer: 'readonly',
        fetch: 'readonly',
        __dirname: 'readonly',
      },
    },
    rules: { 'no-console': 'off', 'no-restricted-syntax': 'off' },
  },
  {
    files: ['scripts/ground/service-worker.js'],
    languageOptions: { globals: { self: 'readonly', caches: 'readonly', clients: 'readonly' } },
    rules: { 'no-undef': 'off' },
  },
];
