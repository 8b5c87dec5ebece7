import { existsSync, readFileSync } from 'node:fs';

/** @typedef {{ passed: number, failed: number, skipped: number }} Counts */

/**
 * What a step did, as counts. A runner's own JSON report is believed, but never more than its exit status: a run that ended badly has at
 * least one failure, and so has a file that could not be loaded.
 * @param {{ report?: string }} step
 * @param {number} status exit status
 * @returns {Counts}
 */
export function countsOf(step, status) {
  if (!step.report) return { passed: status === 0 ? 1 : 0, failed: status === 0 ? 0 : 1, skipped: 0 };
  const counts = existsSync(step.report) ? countsIn(JSON.parse(readFileSync(step.report, 'utf8'))) : none;
  return status !== 0 && counts.failed === 0 ? { ...counts, failed: 1 } : counts;
}

const none = { passed: 0, failed: 0, skipped: 0 };

/** Jest and Vitest write the same shape. */
function countsIn(report) {
  const unloadable = report.testResults.filter(
    (file) => file.status === 'failed' && !file.assertionResults.some(({ status }) => status === 'failed'),
  );
  return {
    passed: report.numPassedTests,
    failed: report.numFailedTests + unloadable.length,
    skipped: report.numPendingTests + (report.numTodoTests ?? 0),
  };
}

/** @param {Counts[]} all @returns {Counts} */
export const sum = (all) =>
  all.reduce((a, b) => ({ passed: a.passed + b.passed, failed: a.failed + b.failed, skipped: a.skipped + b.skipped }), none);

/** '12 passed, 0 failed', with the skipped ones when there are any. */
export const inWords = ({ passed, failed, skipped }) => `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`;
