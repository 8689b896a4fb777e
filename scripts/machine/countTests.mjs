/**
 * Passed and failed tests of a vitest JSON report. A file that could not be loaded has no tests and counts as one
 * failure; so does a report without any test.
 */
export function countTests(report) {
  const broken = report.testResults.filter(
    ({ status, assertionResults }) => status === "failed" && !assertionResults.some((test) => test.status === "failed"),
  );
  const failed = report.numFailedTests + broken.length;
  return { passed: report.numPassedTests, failed: report.numTotalTests === 0 ? Math.max(1, failed) : failed };
}
