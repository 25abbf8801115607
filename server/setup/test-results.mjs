/** Where a test run leaves its results, from the project root. */
export const resultsFile = '.setup/test-results.json';

/**
 * @typedef {{ status: string, assertionResults: unknown[] }} FileResult
 * @typedef {{ numPassedTests: number, numFailedTests: number, testResults: FileResult[] }} TestResults
 */

/**
 * Counts a run's tests. A file that failed before its first test counts as one failed test, and so does a run that failed
 * in any other way: nothing that went wrong may end as "0 failed".
 * @param {TestResults | undefined} results
 * @param {number} exitCode of the commands that led here
 * @returns {{ passed: number, failed: number }}
 */
export function tally(results, exitCode) {
  if (results === undefined) return { passed: 0, failed: 1 };
  const brokenFiles = results.testResults.filter(
    (file) => file.status === 'failed' && file.assertionResults.length === 0,
  );
  const failed = results.numFailedTests + brokenFiles.length;
  const passed = results.numPassedTests;
  const wentWrong = exitCode !== 0 || passed === 0;
  return { passed, failed: wentWrong ? Math.max(1, failed) : failed };
}
