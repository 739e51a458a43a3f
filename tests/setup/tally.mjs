import { readFileSync } from 'node:fs';

/**
 * Adds up what the runners report.
 *
 * @typedef {{ passed: number, failed: number, skipped: number }} Tally
 */

/** @param {string} file @returns {unknown} */
function readJson(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return null;
  }
}

/** @param {unknown} report @param {readonly string[]} names @returns {number} */
function sum(report, names) {
  const figures = /** @type {Record<string, unknown>} */ (report);
  return names.reduce((total, name) => total + Number(figures[name] ?? 0), 0);
}

/** @param {string} file what `vitest --reporter=json` wrote @returns {Tally | null} */
export function vitestTally(file) {
  const report = readJson(file);
  if (report === null) return null;
  return {
    passed: sum(report, ['numPassedTests']),
    failed: sum(report, ['numFailedTests']),
    skipped: sum(report, ['numPendingTests', 'numTodoTests']),
  };
}

/** A test that passed only when tried again has failed. @param {string} file @returns {Tally | null} */
export function playwrightTally(file) {
  const report = /** @type {{ stats?: unknown } | null} */ (readJson(file));
  if (!report?.stats) return null;
  return {
    passed: sum(report.stats, ['expected']),
    failed: sum(report.stats, ['unexpected', 'flaky']),
    skipped: sum(report.stats, ['skipped']),
  };
}

/**
 * What a step counts for. One that broke, or wrote no report, is a failure even if no single test failed.
 *
 * @param {Tally | null} tally
 * @param {number} exitCode
 * @returns {Tally}
 */
export function stepTally(tally, exitCode) {
  const counted = tally ?? { passed: 0, failed: 0, skipped: 0 };
  const broke = tally === null || (exitCode !== 0 && counted.failed === 0);
  return broke ? { ...counted, failed: counted.failed + 1 } : counted;
}

/** @param {readonly Tally[]} tallies @returns {Tally} */
export function addTallies(tallies) {
  return tallies.reduce((a, b) => ({ passed: a.passed + b.passed, failed: a.failed + b.failed, skipped: a.skipped + b.skipped }), {
    passed: 0,
    failed: 0,
    skipped: 0,
  });
}

/** @param {Tally} tally @returns {string} the last line of a run */
export function lastLine({ passed, failed, skipped }) {
  return `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`;
}
