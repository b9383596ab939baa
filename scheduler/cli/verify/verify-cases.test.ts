import { describe, expect, it } from 'vitest';
import { runCommand } from '../run-command.ts';
import { compareAnswers } from './compare-answers.ts';
import { HOW_CHECKED, Judged } from './topic.ts';

function verify(...cases: object[]) {
	return runCommand(['verify'], () => JSON.stringify({ cases }));
}

const formula = { topic: 'task-generic', inputs: { formula: 'a*b', x: { a: 3, b: 2 } } };
const exactly = { abs: 0 };

describe('verify', () => {
	it('prints one line a case and ends with 0 when none fails', () => {
		const { stdout, exitCode } = verify(
			{ ...formula, id: 'mine-1', expected: { value: 6, gradient: [2, 3] }, tolerance: exactly },
			{ ...formula, id: 'mine-2', topic: 'weather', expected: { value: 1 } },
			{ ...formula, id: 3, expected: { value: 6, colour: 'red' } }
		);
		expect(stdout.trimEnd().split('\n')).toEqual([
			'mine-1\tpass',
			'mine-2\tunsupported\tno topic “weather”',
			'3\tunsupported\tdoes not compute colour'
		]);
		expect(exitCode).toBe(0);
	});

	it('says what was got, expected and allowed, and ends with 1', () => {
		const failing = {
			...formula,
			id: 'x',
			expected: { gradient: [2, 4] },
			tolerance: { rel: 0.1 }
		};
		const { stdout, exitCode } = verify(failing);
		expect(stdout).toBe('x\tfail\tgradient[1] (got 3, expected 4, tolerance rel 0.1)\n');
		expect(exitCode).toBe(1);
	});

	it('fails a case whose inputs cannot be computed with, and says why', () => {
		const inputs = { formula: 'a*(b', x: { a: 1, b: 1 } };
		const { stdout } = verify({ ...formula, inputs, id: 'x', expected: { value: 1 } });
		expect(stdout).toMatch(/^x\tfail\tformula, character 5: /);
	});

	it('does not know inputs of other names', () => {
		const { stdout } = verify({ ...formula, inputs: { f: 1 }, id: 'x', expected: { value: 1 } });
		expect(stdout).toBe('x\tunsupported\ttopic “task-generic” has no inputs f\n');
	});

	it('lists topics and inputs without reading anything', () => {
		const never = () => {
			throw new Error('read');
		};
		const { stdout } = runCommand(['verify', '--help'], never);
		expect(stdout).toContain('  task-generic\n      formula, x\n');
	});

	it('names the place of what is no case', () => {
		const { stderr, exitCode } = verify({ id: 'x', topic: 'mass', inputs: {} });
		expect(exitCode).toBe(2);
		expect(stderr).toMatch(/^cases\[0\]\.expected: /);
	});
});

describe('compareAnswers', () => {
	const compare = (got: unknown, expected: unknown, tolerance = {}) =>
		compareAnswers(got, expected, () => tolerance).length === 0;

	it.each([
		[1.05, 1, { abs: 0.1 }, true],
		[1.2, 1, { abs: 0.1 }, false],
		[101, 100, { rel: 0.01 }, true],
		[101, 100, { abs: 0.1, rel: 0.01 }, true],
		[1e-13, 0, { rel: 1 }, true],
		[[1], 1, {}, true],
		[1, [1], {}, true],
		[[1, 2], [1], {}, false],
		[{ a: 1, b: 2 }, { a: 1 }, {}, true],
		[{ a: 1 }, { a: 1, b: 2 }, {}, false],
		[null, null, {}, true],
		[0, null, {}, false],
		['1', 1, {}, false],
		[Number.NaN, 1, { abs: 9 }, false],
		[HOW_CHECKED, 5, {}, true],
		[new Judged([1, -2], { isSignFree: true }), [-1, 2], {}, true],
		[new Judged(1, { tolerance: { abs: 1 } }), 2, {}, true]
	])('%j against %j within %j: %j', (got, expected, tolerance, holds) => {
		expect(compare(got, expected, tolerance)).toBe(holds);
	});
});
