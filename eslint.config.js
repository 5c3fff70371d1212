import js from '@eslint/js';
import boundaries from 'eslint-plugin-boundaries';
import importX from 'eslint-plugin-import-x';
import jsxA11y from 'eslint-plugin-jsx-a11y';
import reactHooks from 'eslint-plugin-react-hooks';
import tseslint from 'typescript-eslint';

// Who may import whom. A part may import what stands in the rows above its own, and what `also` names beside it.

const engineParts = importTable('src/engine', 'engine', [
  ['reference'],
  ['model'],
  ['network'],
  ['wire', 'flood'],
  ['trace', 'load', 'outage', 'numbering'],
  ['rules'],
  ['sheets', 'stretch'],
]);
const engineNames = [...engineParts.map((part) => part.name), 'engine/formats', 'engine/diff'];
const besidesTheOrder = [
  part('engine/formats', 'src/engine/formats', ['engine/reference', 'engine/model']),
  part('engine/diff', 'src/engine/diff', ['engine/reference', 'engine/model']),
];

const browserParts = importTable(
  'src',
  'src',
  [
    ['drawing', 'contract'],
    ['lib', 'components'],
    ['workspace'],
    ['canvas'],
    ['features/*'],
    ['pages'],
    ['app'],
    ['main.tsx'],
  ],
  {
    before: engineNames,
    also: { components: ['lib'] },
  },
).map((each) => (each.name === 'src/drawing' ? { ...each, mayImport: engineNames } : each));

const serverParts = importTable(
  'server',
  'server',
  [
    ['config.ts', 'errors.ts'],
    ['db', 'mail'],
    ['repositories'],
    ['auth', 'live', 'jobs'],
    ['services'],
    ['middleware', 'routes'],
    ['app.ts'],
    ['main.ts'],
  ],
  { also: { routes: ['middleware'] } },
);

// Set-up runs the schema and reads the configuration; nothing in the program knows of it.
const bootstrap = part('server/bootstrap', 'server/bootstrap', ['server/config.ts', 'server/db']);

const parts = [...engineParts, ...besidesTheOrder, ...browserParts, ...serverParts, bootstrap];

/** Packages that compute and do nothing else. */
const purePackages = ['zod', 'ipaddr\\.js', 'fractional-indexing'];

export default tseslint.config(
  { ignores: ['dist/', 'coverage/', '.longpatch/', 'node_modules/'] },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  {
    linterOptions: { reportUnusedDisableDirectives: 'error' },
    plugins: { 'import-x': importX },
    rules: {
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      // The compiler knows better which names exist.
      'no-undef': 'off',
      // A log belongs to the server's logger; what a browser cannot handle may stand in its console.
      'no-console': ['error', { allow: ['error'] }],
      'import-x/first': 'error',
      'import-x/no-duplicates': 'error',
      'import-x/extensions': ['error', 'always', { ignorePackages: true, checkTypeImports: true }],
      'import-x/no-default-export': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
    },
  },
  {
    // Tools read the default export of these.
    files: ['*.config.{js,ts}', 'knexfile.ts', 'tests/support/*.ts', 'tests/bench/**'],
    rules: { 'import-x/no-default-export': 'off' },
  },
  {
    // What is started by hand speaks to a terminal.
    files: ['server/bootstrap/**', 'tests/support/**', 'tests/bench/**'],
    rules: { 'no-console': 'off' },
  },
  {
    files: ['src/**/*.{ts,tsx}', 'tests/**/*.{ts,tsx}'],
    ...reactHooks.configs.flat.recommended,
  },
  {
    files: ['src/**/*.tsx'],
    ...jsxA11y.flatConfigs.recommended,
  },
  {
    files: ['src/**/*.{ts,tsx}', 'server/**/*.{ts,mjs}'],
    plugins: { boundaries },
    settings: {
      'boundaries/elements': parts.filter(isFolder).map(({ name, pattern }) => ({
        type: name,
        pattern,
        ...(pattern.endsWith('/*') ? { capture: ['name'] } : {}),
      })),
      'boundaries/files': parts
        .filter((each) => !isFolder(each))
        .map(({ name, pattern }) => ({ category: name, pattern })),
      'import/resolver': { node: { extensions: ['.ts', '.tsx', '.mjs', '.js'] } },
    },
    rules: {
      'boundaries/no-unknown-files': 'error',
      'boundaries/dependencies': [
        'error',
        {
          default: 'disallow',
          policies: parts.map((each) => ({
            from: selectorOf(each),
            allow: parts
              .filter(({ name }) => each.mayImport.includes(name))
              .map((imported) => ({ to: selectorOf(imported) })),
          })),
        },
      ],
    },
  },
  {
    files: ['server/**/*.{ts,mjs}', 'migrations/**', 'seeds/**'],
    rules: {
      'no-restricted-imports': [
        'error',
        {
          patterns: [
            {
              regex: '(^|/)src/|^(\\.\\./)+tests/',
              message: 'The server takes #engine, #drawing and #contract from src, nothing else.',
            },
          ],
        },
      ],
    },
  },
  {
    files: ['src/engine/**/*.ts', 'src/drawing/**/*.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        {
          patterns: [
            {
              regex: `^(?!\\.{1,2}/|(${purePackages.join('|')})$)`,
              message: 'The engine and the drawing are pure: no package that touches the world.',
            },
          ],
        },
      ],
      'no-restricted-globals': [
        'error',
        ...[
          'window',
          'document',
          'navigator',
          'location',
          'localStorage',
          'sessionStorage',
          'fetch',
          'XMLHttpRequest',
          'process',
          'performance',
          'crypto',
          'setTimeout',
          'setInterval',
          'queueMicrotask',
          'console',
        ].map((name) => ({ name, message: 'The same design must give the same answer everywhere.' })),
      ],
      'no-restricted-properties': [
        'error',
        { object: 'Date', property: 'now', message: 'Take the time as a value.' },
        { object: 'Math', property: 'random', message: 'The same design must give the same answer.' },
      ],
      'no-restricted-syntax': [
        'error',
        {
          selector: "NewExpression[callee.name='Date'][arguments.length=0]",
          message: 'Take the time as a value.',
        },
      ],
    },
  },
);

/**
 * Reads rows of sibling parts, from those that know nobody to those that nobody knows.
 * @param {string} folder
 * @param {string} prefix
 * @param {string[][]} rows
 * @param {{ before?: string[], also?: Record<string, string[]> }} [options]
 */
function importTable(folder, prefix, rows, { before = [], also = {} } = {}) {
  const named = (/** @type {string} */ name) => `${prefix}/${name}`;
  return rows.flatMap((row, index) =>
    row.map((name) =>
      part(named(name), `${folder}/${name}`, [
        ...before,
        ...rows.slice(0, index).flat().map(named),
        ...(also[name] ?? []).map(named),
      ]),
    ),
  );
}

/**
 * @param {string} name
 * @param {string} pattern
 * @param {string[]} mayImport
 */
function part(name, pattern, mayImport) {
  return { name, pattern, mayImport };
}

/** @param {{ pattern: string }} each */
function isFolder({ pattern }) {
  return !/\.tsx?$/.test(pattern);
}

/** @param {{ name: string, pattern: string }} each */
function selectorOf(each) {
  return isFolder(each) ? { element: { type: each.name } } : { file: { categories: each.name } };
}
