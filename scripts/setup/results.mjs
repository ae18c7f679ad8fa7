// Adds up what the two test runners say. Plain functions, tested beside.

/**
 * @typedef {object} Totals
 * @property {number} passed
 * @property {number} failed
 * @property {string[]} skipped names
 */

/**
 * Counts of vitest's JSON report. A file that cannot even be loaded has no tests: it counts as one failure.
 * @param {any} report
 * @returns {Totals}
 */
export function countVitest(report) {
  /** @type {Totals} */
  const totals = { passed: 0, failed: 0, skipped: [] };
  for (const file of report.testResults) {
    if (file.status === "failed" && file.assertionResults.length === 0) totals.failed++;
    for (const test of file.assertionResults) {
      if (test.status === "passed") totals.passed++;
      else if (test.status === "failed") totals.failed++;
      else totals.skipped.push(test.fullName);
    }
  }
  return totals;
}

/**
 * Counts of Playwright's JSON report. A test that passed only when tried again has failed once: it counts as failed.
 * @param {any} report
 * @returns {Totals}
 */
export function countPlaywright(report) {
  /** @type {Totals} */
  const totals = { passed: 0, failed: report.errors?.length ?? 0, skipped: [] };
  for (const suite of report.suites) addSuite(totals, suite, []);
  return totals;
}

/**
 * @param {Totals} totals
 * @param {any} suite
 * @param {string[]} titles
 */
function addSuite(totals, suite, titles) {
  for (const inner of suite.suites ?? []) addSuite(totals, inner, [...titles, suite.title]);
  for (const spec of suite.specs ?? []) {
    for (const test of spec.tests) {
      if (test.status === "expected") totals.passed++;
      else if (test.status === "skipped") totals.skipped.push([...titles, suite.title, spec.title].join(" > "));
      else totals.failed++;
    }
  }
}

/**
 * @param {Totals[]} parts
 * @returns {Totals}
 */
export function addTotals(parts) {
  return {
    passed: parts.reduce((sum, part) => sum + part.passed, 0),
    failed: parts.reduce((sum, part) => sum + part.failed, 0),
    skipped: parts.flatMap((part) => part.skipped),
  };
}
