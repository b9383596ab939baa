import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { addUp, countReport, countWords } from '../../../scripts/test/count.mjs';
import { planTests, tiers } from '../../../scripts/test/plan.mjs';

const checkout = resolve('.');
let folder: string;
beforeAll(() => void (folder = mkdtempSync(join(tmpdir(), 'ovalry-report-'))));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

describe('what npm test runs', () => {
	it('is every tier where nothing is named', () => {
		expect(planTests([], checkout)).toEqual({ tiers, files: [], rest: [] });
	});

	it('is the tiers that are named, in their own order', () => {
		expect(planTests(['e2e', 'unit'], checkout).tiers).toEqual(['unit', 'e2e']);
	});

	it('is the tier of a file that is named', () => {
		const file = 'tests/integration/start/test-runner.test.ts';
		expect(planTests([file], checkout)).toEqual({
			tiers: ['integration'],
			files: [file],
			rest: []
		});
		expect(planTests(['vite.config.ts'], checkout).tiers).toEqual(['unit']);
	});

	it('hands on options', () => {
		const plan = planTests(['integration', '-t', 'a name'], checkout);
		expect(plan).toEqual({ tiers: ['integration'], files: [], rest: ['-t', 'a name'] });
	});

	it('refuses what is neither a tier nor a file', () => {
		expect(() => planTests(['integrtion'], checkout)).toThrow(/no test and no tier "integrtion"/);
	});
});

describe('the sum of all runners', () => {
	const report = (content: object) => {
		const file = join(folder, `${Math.abs(JSON.stringify(content).length)}.json`);
		writeFileSync(file, JSON.stringify(content));
		return file;
	};
	const counts = { numPassedTests: 3, numFailedTests: 0, numPendingTests: 1, numTodoTests: 0 };
	const whole = [{ status: 'passed', assertionResults: [{ status: 'passed' }] }];

	it('takes the counts of a report', () => {
		const file = report({ ...counts, testResults: whole });
		expect(countReport(file, 0)).toEqual({ passed: 3, failed: 0, skipped: 1 });
	});

	it('counts a file that could not be loaded as failed', () => {
		const broken = { status: 'failed', assertionResults: [] };
		const file = report({ ...counts, testResults: [...whole, broken] });
		expect(countReport(file, 1).failed).toBe(1);
	});

	it('counts a run that broke off as failed', () => {
		expect(countReport(join(folder, 'none.json'), 1).failed).toBe(1);
	});

	it('counts a fault outside any test as failed', () => {
		const file = report({ ...counts, testResults: whole });
		expect(countReport(file, 1).failed).toBe(1);
	});

	it('is worded for the last line', () => {
		const sum = addUp([
			{ passed: 3, failed: 0, skipped: 0 },
			{ passed: 2, failed: 1, skipped: 0 }
		]);
		expect(countWords(sum)).toBe('5 passed, 1 failed');
		expect(countWords({ ...sum, skipped: 4 })).toBe('5 passed, 1 failed, 4 skipped');
	});
});
