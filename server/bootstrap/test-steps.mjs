import { join } from 'node:path';
import { projectFolder } from './folders.mjs';

/**
 * @typedef {object} TestStep
 * @property {string} name as in `npm test -- NAME`
 * @property {readonly (readonly string[])[]} checks programs whose success is one passed test together; empty for a step of tests
 * @property {readonly string[] | null} vitest arguments that choose the step's tests; null for a step of checks
 * @property {boolean} needsDatabase
 * @property {boolean} needsBrowser
 * @property {boolean} needsKernel tests that skip themselves where this machine's kernel or user allows no comparison
 */

/**
 * @param {string} name
 * @param {readonly (readonly string[])[]} checks
 * @returns {TestStep}
 */
function checks(name, checks) {
  return { name, checks, vitest: null, needsDatabase: false, needsBrowser: false, needsKernel: false };
}

/**
 * @param {string} name
 * @param {readonly string[]} vitest
 * @param {{ needsDatabase?: boolean, needsBrowser?: boolean, needsKernel?: boolean }} [needs]
 * @returns {TestStep}
 */
function tests(name, vitest, { needsDatabase = false, needsBrowser = false, needsKernel = false } = {}) {
  return { name, checks: [], vitest, needsDatabase, needsBrowser, needsKernel };
}

const typescript = join('node_modules', 'typescript', 'bin', 'tsc');

/** Everything that `npm test` runs, in order: what is quick and most often wrong comes first. */
export const testSteps = [
  checks('types', [
    [typescript, '--noEmit', '-p', 'tsconfig.json'],
    [typescript, '--noEmit', '-p', 'src/engine'],
    [typescript, '--noEmit', '-p', 'src/drawing'],
  ]),
  checks('lint', [[join('node_modules', 'eslint', 'bin', 'eslint.js'), '--max-warnings=0', '.']]),
  checks('format', [
    [join('node_modules', 'prettier', 'bin', 'prettier.cjs'), '--check', '--log-level=warn', '.'],
  ]),
  tests('layout', ['--project=engine', 'tests/layout/']),
  tests('engine', ['--project=engine', '--exclude=tests/layout/**']),
  tests('kernel', ['--project=kernel'], { needsKernel: true }),
  tests('server', ['--project=server'], { needsDatabase: true }),
  tests('client', ['--project=client']),
  tests('e2e', ['--project=e2e'], { needsDatabase: true, needsBrowser: true }),
];

/**
 * Reads the arguments of `npm test --`: names of steps narrow the run, everything else goes to the test runner.
 * @param {readonly string[]} args
 * @returns {{ ok: true, steps: TestStep[], rest: string[] } | { ok: false, problem: string }}
 */
export function chooseSteps(args) {
  const named = new Set(args.filter((argument) => testSteps.some((step) => step.name === argument)));
  const rest = args.filter((argument) => !named.has(argument));
  if (named.size === 0 && rest.length > 0) {
    const names = testSteps.map((step) => step.name).join(', ');
    return { ok: false, problem: `'${rest[0]}' is not a step of npm test; name one or more of ${names}.` };
  }
  return { ok: true, steps: testSteps.filter((step) => named.size === 0 || named.has(step.name)), rest };
}

/**
 * @param {string} reportFile
 * @param {readonly string[]} vitest
 * @param {readonly string[]} rest
 * @returns {string[]}
 */
export function vitestCommand(reportFile, vitest, rest) {
  return [
    join(projectFolder, 'node_modules', 'vitest', 'vitest.mjs'),
    'run',
    ...vitest,
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${reportFile}`,
    ...rest,
  ];
}
