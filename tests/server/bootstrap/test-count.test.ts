import { describe, expect, test } from 'vitest';
import { closingLine, countVitestReport } from '../../../server/bootstrap/test-count.mjs';
import { chooseSteps, testSteps } from '../../../server/bootstrap/test-steps.mjs';

function report(...files: (readonly string[] | 'broken')[]) {
  const results = files.map((statuses) => ({
    status: statuses === 'broken' || statuses.includes('failed') ? 'failed' : 'passed',
    assertionResults: statuses === 'broken' ? [] : statuses.map((status) => ({ status })),
  }));
  const all = results.flatMap((file) => file.assertionResults.map((assertion) => assertion.status));
  return {
    numPassedTests: all.filter((status) => status === 'passed').length,
    numFailedTests: all.filter((status) => status === 'failed').length,
    numPendingTests: all.filter((status) => status === 'skipped').length,
    testResults: results,
  };
}

describe('counting a run', () => {
  test('takes passed and failed tests as they are', () => {
    expect(countVitestReport(report(['passed', 'passed'], ['failed', 'passed']), 1)).toEqual({
      passed: 3,
      failed: 1,
    });
    expect(countVitestReport(report(['passed']), 0)).toEqual({ passed: 1, failed: 0 });
  });

  test('takes a file that broke outside its tests for one failure', () => {
    expect(countVitestReport(report(['passed'], 'broken'), 1)).toEqual({ passed: 1, failed: 1 });
  });

  test.each([
    ['left no report', null, 1],
    ['was killed', report(['passed']), null],
    ['ended badly although every test passed', report(['passed']), 1],
    ['had no test to run', report(), 0],
    ['skipped every test', report(['skipped']), 0],
  ])('takes a run that %s for failed', (_what, vitestReport, exitCode) => {
    const count = countVitestReport(vitestReport, exitCode);
    expect(count.failed).toBe(1);
    expect(count.note).toBeDefined();
  });

  test('lets a run that may do so skip its tests, and counts them as skipped', () => {
    const skipped = report(['skipped', 'skipped'], ['passed']);
    expect(countVitestReport(skipped, 0, { maySkip: true })).toEqual({ passed: 1, failed: 0, skipped: 2 });
    expect(countVitestReport(report(['skipped']), 0, { maySkip: true })).toEqual({
      passed: 0,
      failed: 0,
      skipped: 1,
    });
    expect(countVitestReport(report(['skipped', 'failed']), 1, { maySkip: true }).failed).toBe(1);
    expect(countVitestReport(report(), 0, { maySkip: true }).failed).toBe(1);
  });

  test('closes with the sum of all steps', () => {
    expect(
      closingLine([
        { passed: 1, failed: 0 },
        { passed: 20, failed: 2 },
      ]),
    ).toBe('21 passed, 2 failed');
    expect(closingLine([])).toBe('0 passed, 0 failed');
    expect(
      closingLine([
        { passed: 1, failed: 0 },
        { passed: 0, failed: 0, skipped: 3 },
      ]),
    ).toBe('1 passed, 0 failed, 3 skipped');
  });
});

describe('the arguments of npm test', () => {
  const names = (args: readonly string[]) => {
    const chosen = chooseSteps(args);
    return chosen.ok
      ? [...chosen.steps.map((step) => step.name), ...chosen.rest.map((arg) => `+${arg}`)]
      : [];
  };

  test('choose nothing when there are none: every step runs', () => {
    expect(names([])).toEqual(testSteps.map((step) => step.name));
  });

  test('choose steps by name, in the order of a whole run', () => {
    expect(names(['engine', 'types'])).toEqual(['types', 'engine']);
  });

  test('hand everything else to the test runner', () => {
    expect(names(['engine', 'tests/engine/wire'])).toEqual(['engine', '+tests/engine/wire']);
  });

  test('are refused when they name no step', () => {
    expect(chooseSteps(['enigne'])).toEqual({
      ok: false,
      problem:
        "'enigne' is not a step of npm test; name one or more of types, lint, format, layout, engine, kernel, server, client, e2e.",
    });
  });
});
