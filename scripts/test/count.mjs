import { existsSync, readFileSync } from 'node:fs';

/** @typedef {{ passed: number, failed: number, skipped: number }} Counts */

/**
 * Counts of one vitest run from its JSON report. A file that could not be loaded has no tests in
 * it, a run that broke off has no report: both count as failed, so that no fault adds up to zero.
 *
 * @param {string} file
 * @param {number} exitCode
 * @returns {Counts}
 */
export function countReport(file, exitCode) {
	if (!existsSync(file)) return { passed: 0, failed: 1, skipped: 0 };
	const report = JSON.parse(readFileSync(file, 'utf8'));
	const broken = report.testResults.filter(
		({ status, assertionResults }) =>
			status === 'failed' && !assertionResults.some((one) => one.status === 'failed')
	).length;
	const failed = report.numFailedTests + broken;
	return {
		passed: report.numPassedTests,
		failed: failed === 0 && exitCode !== 0 ? 1 : failed,
		skipped: report.numPendingTests + report.numTodoTests
	};
}

/** @param {Counts[]} all @returns {Counts} */
export function addUp(all) {
	const sum = { passed: 0, failed: 0, skipped: 0 };
	for (const one of all) for (const name of Object.keys(sum)) sum[name] += one[name];
	return sum;
}

/** @param {Counts} counts */
export function countWords({ passed, failed, skipped }) {
	return `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`;
}
