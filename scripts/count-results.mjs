/** @typedef {{ readonly passed: number, readonly failed: number, readonly skipped: number }} Counts */

/**
 * Reads the counts out of a report of vitest's `json` reporter. A file of tests that could not be loaded counts as one
 * that failed.
 *
 * @param {unknown} report
 * @returns {Counts}
 */
export function countVitest(report) {
  const { numPassedTests, numFailedTests, numPendingTests, numTodoTests, testResults } =
    /** @type {Record<string, unknown>} */ (report);
  const broken = Array.isArray(testResults)
    ? testResults.filter(({ status, assertionResults }) => status === 'failed' && assertionResults?.length === 0).length
    : 0;
  return {
    passed: whole(numPassedTests),
    failed: whole(numFailedTests) + broken,
    skipped: whole(numPendingTests ?? 0) + whole(numTodoTests ?? 0),
  };
}

/**
 * Reads the counts out of a report of Playwright's `json` reporter. A test that passed only when tried again failed.
 * Errors outside tests, such as a server that does not start, count as one each.
 *
 * @param {unknown} report
 * @returns {Counts}
 */
export function countPlaywright(report) {
  const { stats, errors } = /** @type {{ stats: Record<string, unknown>, errors?: unknown[] }} */ (report);
  return {
    passed: whole(stats['expected']),
    failed: whole(stats['unexpected']) + whole(stats['flaky']) + (errors?.length ?? 0),
    skipped: whole(stats['skipped']),
  };
}

/**
 * Completes what a runner's report says with how the runner ended: one that fails without saying which test, or runs
 * none, has failed itself.
 *
 * @param {Counts | null} counts null where there is no report that can be read
 * @param {number} code the runner's exit code
 * @returns {Counts & { readonly remark: string }}
 */
export function judgeRunner(counts, code) {
  if (!counts) return { passed: 0, failed: 1, skipped: 0, remark: 'left no report' };
  if (counts.passed + counts.failed === 0) return { ...counts, failed: 1, remark: 'ran no test' };
  if (code !== 0 && counts.failed === 0)
    return { ...counts, failed: 1, remark: `ended with code ${String(code)} though no test failed` };
  return { ...counts, remark: '' };
}

/**
 * The last line of `npm test`.
 *
 * @param {readonly { readonly passed: number, readonly failed: number }[]} results
 * @returns {string}
 */
export function totalLine(results) {
  const sum = (/** @type {'passed' | 'failed'} */ which) => results.reduce((total, each) => total + each[which], 0);
  return `${String(sum('passed'))} passed, ${String(sum('failed'))} failed`;
}

/** @param {unknown} value */
function whole(value) {
  if (!Number.isInteger(value)) throw new Error('The report does not have the counts where they are expected.');
  return /** @type {number} */ (value);
}
