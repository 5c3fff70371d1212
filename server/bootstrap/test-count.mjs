/**
 * @typedef {{ passed: number, failed: number, note?: string }} TestCount
 *
 * @typedef {object} VitestReport the parts of the test runner's JSON report that are counted
 * @property {number} numPassedTests
 * @property {number} numFailedTests
 * @property {readonly { status: string, assertionResults: readonly { status: string }[] }[]} testResults
 */

/**
 * Counts the tests of one run. A file that broke outside its tests, a run that crashed and a run without tests count as failed,
 * so that nothing that went wrong can end in a count without failures.
 * @param {VitestReport | null} report null when the run left none
 * @param {number | null} exitCode null when the run was killed
 * @returns {TestCount}
 */
export function countVitestReport(report, exitCode) {
  if (report === null) return { passed: 0, failed: 1, note: 'the test runner ended without a report' };
  const passed = report.numPassedTests;
  const brokenFiles = report.testResults.filter(
    ({ status, assertionResults }) =>
      status === 'failed' && !assertionResults.some((assertion) => assertion.status === 'failed'),
  ).length;
  const failed = report.numFailedTests + brokenFiles;
  if (failed > 0) return { passed, failed };
  if (exitCode !== 0) return { passed, failed: 1, note: `the test runner ended with exit code ${exitCode}` };
  if (passed === 0) return { passed, failed: 1, note: 'there was no test to run' };
  return { passed, failed };
}

/**
 * The line that closes a whole run.
 * @param {readonly TestCount[]} counts
 * @returns {string}
 */
export function closingLine(counts) {
  return `${total(counts, 'passed')} passed, ${total(counts, 'failed')} failed`;
}

/**
 * @param {readonly TestCount[]} counts
 * @param {'passed' | 'failed'} field
 */
function total(counts, field) {
  return counts.reduce((sum, count) => sum + count[field], 0);
}
