/**
 * @typedef {{ passed: number, failed: number, skipped?: number, note?: string }} TestCount
 *
 * @typedef {object} VitestReport the parts of the test runner's JSON report that are counted
 * @property {number} numPassedTests
 * @property {number} numFailedTests
 * @property {number} numPendingTests those that skipped themselves
 * @property {readonly { status: string, assertionResults: readonly { status: string }[] }[]} testResults
 */

/**
 * Counts the tests of one run. A file that broke outside its tests, a run that crashed and a run without tests count as failed,
 * so that nothing that went wrong can end in a count without failures.
 * @param {VitestReport | null} report null when the run left none
 * @param {number | null} exitCode null when the run was killed
 * @param {{ maySkip?: boolean }} [options] whether a run may skip all its tests, because this machine can't hold them
 * @returns {TestCount}
 */
export function countVitestReport(report, exitCode, { maySkip = false } = {}) {
  if (report === null) return { passed: 0, failed: 1, note: 'the test runner ended without a report' };
  const passed = report.numPassedTests;
  const brokenFiles = report.testResults.filter(
    ({ status, assertionResults }) =>
      status === 'failed' && !assertionResults.some((assertion) => assertion.status === 'failed'),
  ).length;
  const failed = report.numFailedTests + brokenFiles;
  if (failed > 0) return { passed, failed };
  if (exitCode !== 0) return { passed, failed: 1, note: `the test runner ended with exit code ${exitCode}` };
  const skipped = report.numPendingTests;
  if (maySkip && skipped > 0) return { passed, failed, skipped };
  if (passed === 0) return { passed, failed: 1, note: 'there was no test to run' };
  return { passed, failed };
}

/**
 * The line that closes a whole run.
 * @param {readonly TestCount[]} counts
 * @returns {string}
 */
export function closingLine(counts) {
  const skipped = total(counts, 'skipped');
  const besides = skipped === 0 ? '' : `, ${skipped} skipped`;
  return `${total(counts, 'passed')} passed, ${total(counts, 'failed')} failed${besides}`;
}

/**
 * @param {readonly TestCount[]} counts
 * @param {'passed' | 'failed' | 'skipped'} field
 */
function total(counts, field) {
  return counts.reduce((sum, count) => sum + (count[field] ?? 0), 0);
}
