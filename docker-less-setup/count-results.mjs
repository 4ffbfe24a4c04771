import { existsSync, readFileSync } from "node:fs";

/** @typedef {{ passed: number, failed: number, notes: string[] }} Count */

/**
 * Counts the report of a test runner. What did not run proves nothing, so it counts as failed; so does a runner that
 * failed without a failed test, or that ran no test.
 * @param {string} runner name for the notes
 * @param {Count | null} read null: there is no report
 * @param {number | null} exitCode of the runner
 * @returns {Count}
 */
function judged(runner, read, exitCode) {
  const count = read ?? { passed: 0, failed: 0, notes: [`${runner} left no report.`] };
  if (count.failed === 0 && count.passed === 0) {
    return { passed: 0, failed: 1, notes: [...count.notes, `${runner} ran no test.`] };
  }
  if (count.failed === 0 && exitCode !== 0) {
    const note = `${runner} ended with code ${exitCode} although no single test failed.`;
    return { passed: count.passed, failed: 1, notes: [...count.notes, note] };
  }
  return count;
}

/** @param {string} file @returns {any} the report, or null when there is none or it is cut off */
function readReport(file) {
  if (!existsSync(file)) return null;
  try {
    return JSON.parse(readFileSync(file, "utf8"));
  } catch {
    return null;
  }
}

/** @param {string} what @param {number} count @returns {string[]} */
const unrun = (what, count) => (count > 0 ? [`${count} ${what}, counted as failed.`] : []);

/** @param {string} file what tests/architecture/check.mjs wrote @param {number | null} exitCode @returns {Count} */
export function countChecks(file, exitCode) {
  const report = readReport(file);
  return judged("npm run check", report && { ...report, notes: [] }, exitCode);
}

/** @param {string} file JSON report of vitest @param {number | null} exitCode @returns {Count} */
export function countVitest(file, exitCode) {
  const report = readReport(file);
  if (!report) return judged("vitest", null, exitCode);
  const setAside = report.numPendingTests + report.numTodoTests;
  // A file that could not be loaded has no tests to fail.
  const unloaded = report.testResults.filter(
    (/** @type {{ status: string, assertionResults: unknown[] }} */ { status, assertionResults }) =>
      status === "failed" && assertionResults.length === 0,
  ).length;
  return judged(
    "vitest",
    {
      passed: report.numPassedTests,
      failed: report.numFailedTests + setAside + unloaded,
      notes: [
        ...unrun("tests were set aside", setAside),
        ...unrun("test files could not be loaded", unloaded),
      ],
    },
    exitCode,
  );
}

/** @param {string} file JSON report of Playwright @param {number | null} exitCode @returns {Count} */
export function countPlaywright(file, exitCode) {
  const report = readReport(file);
  if (!report) return judged("Playwright", null, exitCode);
  const { expected, unexpected, flaky, skipped } = report.stats;
  return judged(
    "Playwright",
    {
      passed: expected,
      failed: unexpected + flaky + skipped,
      notes: [
        ...unrun("browser tests were skipped", skipped),
        ...unrun("browser tests passed only at a second try", flaky),
      ],
    },
    exitCode,
  );
}
