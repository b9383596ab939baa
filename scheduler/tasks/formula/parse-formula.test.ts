import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compileDual, compileValue } from './compile-formula.ts';
import { parseFormula } from './parse-formula.ts';

const NAMES = ['a', 'b', 'hand_angle_deg'];

function compute(text: string, x: number[] = [2, 3, 5]): number {
	const parsed = parseFormula(text, NAMES);
	if (!parsed.ok) throw new RangeError(parsed.message);
	return compileValue(parsed.expression)(x);
}

function fault(text: string) {
	const parsed = parseFormula(text, NAMES);
	return parsed.ok ? null : [parsed.position, parsed.message];
}

describe('parseFormula', () => {
	it.each([
		['1 + 2 * 3', 7],
		['(1 + 2) * 3', 9],
		['2 ^ 3 ^ 2', 512],
		['-a^2', -4],
		['(-a)^2', 4],
		['2^-1', 0.5],
		['10 - 4 - 3', 3],
		['12 / 3 / 2', 2],
		['- -a', 2],
		['1.5e1 + .5', 15.5],
		['a−b×2÷4·1', 0.5],
		['hand_angle_deg', 5],
		['atan2(0, -1) - pi', 0],
		['min(a, b) + max(a, b) + abs(-1)', 6],
		['sqrt(4) + exp(0) + log(1)', 3],
		['sin(0) + cos(0) + tan(0) + asin(0) + acos(1) + atan(0)', 1]
	])('computes %s', (text, value) => {
		expect(compute(text)).toBeCloseTo(value, 12);
	});

	it.each([
		['a +', 3, 'the end of the formula stands where a number, a variable or a bracket is needed'],
		['a b', 2, '“b” stands where an operator or the end is needed'],
		['(a', 2, 'the end of the formula stands where “)” is needed'],
		['speed * 2', 0, '“speed” is neither a variable (a, b, hand_angle_deg) nor a known function'],
		['sin a', 4, '“a” stands where “(” is needed'],
		['sin(a, b)', 0, 'sin takes one value, not 2'],
		['min(a)', 0, 'min takes two values, not 1'],
		['a; b', 1, '“;” cannot stand in a formula'],
		['1e999', 0, 'the number 1e999 is too large'],
		['', 0, 'the end of the formula stands where a number, a variable or a bracket is needed'],
		[
			'constructor',
			0,
			'“constructor” is neither a variable (a, b, hand_angle_deg) nor a known function'
		]
	])('refuses “%s” at its place', (text, position, message) => {
		expect(fault(text)).toEqual([position, message]);
	});

	it('refuses what is too long or nested too deep', () => {
		expect(fault('1+'.repeat(600))?.[1]).toMatch(/1000 characters/);
		expect(fault('('.repeat(200) + 'a' + ')'.repeat(200))?.[1]).toMatch(/deeper than/);
	});

	it('never throws on any text', () => {
		fc.assert(
			fc.property(fc.string({ maxLength: 40 }), (text) => {
				expect(typeof parseFormula(text, NAMES).ok).toBe('boolean');
			})
		);
	});
});

describe('compileDual', () => {
	const slopes = (text: string, x = [2, 3, 5]) => {
		const parsed = parseFormula(text, NAMES);
		return parsed.ok ? compileDual(parsed.expression, 3)(x).slopes : [];
	};

	it('is exact for products, quotients and powers', () => {
		expect(slopes('a*b')).toEqual([3, 2, 0]);
		expect(slopes('a/b')).toEqual([1 / 3, -2 / 9, 0]);
		expect(slopes('a^3')).toEqual([12, 0, 0]);
	});

	it('differentiates a power of a negative number', () => {
		expect(slopes('a^2', [-2, 0, 0])).toEqual([-4, 0, 0]);
	});

	it('adds nothing from parts that do not depend on a variable', () => {
		expect(slopes('a + sqrt(b - b)')).toEqual([1, expect.anything(), 0]);
		expect(slopes('a + 0*sqrt(0)')).toEqual([1, 0, 0]);
	});

	it('follows the branch of min, max and abs', () => {
		expect(slopes('min(a, b)')).toEqual([1, 0, 0]);
		expect(slopes('max(a, b)')).toEqual([0, 1, 0]);
		expect(slopes('abs(a - b)')).toEqual([-1, 1, 0]);
	});
});
