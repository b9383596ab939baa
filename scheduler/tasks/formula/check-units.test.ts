import { describe, expect, it } from 'vitest';
import { checkUnits } from './check-units.ts';
import { parseFormula } from './parse-formula.ts';
import { readUnit, writeKind } from './read-unit.ts';

const quantities = {
	x: 'm',
	c: 'cm',
	v: 'm/s',
	t: 's',
	F: 'N',
	m: 'kg',
	a: 'deg',
	r: 'rad',
	n: ''
};

function codes(formula: string, resultUnit = 'm', more: Record<string, string> = {}) {
	const all: Record<string, string> = { ...quantities, ...more };
	const names = Object.keys(all);
	const parsed = parseFormula(formula, names);
	if (!parsed.ok) throw new Error(parsed.message);
	const units = names.map((name) => all[name] ?? '');
	return checkUnits(parsed.expression, { names, units, resultUnit }).map(({ code }) => code);
}

describe('units of a formula', () => {
	it.each([
		['x + v', 'mixed-sum'],
		['x - v * t * t', 'mixed-sum'],
		['min(x, t)', 'mixed-sum'],
		['x + 9.81 * t', 'sum-needs-number-unit'],
		['x + v^2 / (2 * 0.18 * 9.81) - 2', 'sum-needs-number-unit'],
		['x + c', 'different-size'],
		['x * sin(a)', 'degrees-as-radians'],
		['x * sin(t)', 'unit-in-function'],
		['x * exp(v)', 'unit-in-function'],
		['x ^ n', 'variable-power'],
		['v', 'result-unit'],
		['c', 'different-size'],
		['v * 0.3', 'sum-needs-number-unit']
	])('%s is pointed out as %s', (formula, code) => {
		expect(codes(formula)).toContain(code);
	});

	it.each([
		['x + v * t - 2', 'm'],
		['2 * x - v * t / 2', 'm'],
		['x * cos(a * pi / 180) - 20', 'm'],
		['x * sin(r)', 'm'],
		['F / m - v / t', 'm/s²'],
		['F * x', 'J'],
		['sqrt(x * x + (v * t)^2)', 'm'],
		['atan2(x, v * t)', 'rad'],
		['abs(x) * exp(-t / t)', 'm'],
		['log(F / (m * v / t))', ''],
		['max(x, 0) - 0.4', 'm'],
		['3 * x^2', 'm^2']
	])('%s in %s is left alone', (formula, unit) => {
		expect(codes(formula, unit)).toEqual([]);
	});

	it('names both sides with what they measure', () => {
		const parsed = parseFormula('x + v', ['x', 'v']);
		const notes = parsed.ok
			? checkUnits(parsed.expression, { names: ['x', 'v'], units: ['m', 'm/s'], resultUnit: 'm' })
			: [];
		expect(notes).toEqual([{ code: 'mixed-sum', left: 'x (m)', right: 'v (m·s⁻¹)' }]);
	});

	it('takes an unknown name for a quantity of its own', () => {
		expect(codes('q - p', 'clicks', { q: 'clicks', p: 'clicks' })).toEqual([]);
		expect(codes('q - p', 'clicks', { q: 'clicks', p: 'points' })).toContain('mixed-sum');
	});

	it('says which text is no unit', () => {
		expect(codes('x', 'm', { x: 'm//s' })).toEqual(['unreadable-unit']);
	});
});

describe('reading of a unit', () => {
	it.each([
		['m/s²', { m: 1, s: -2 }, 1],
		['m/s^2', { m: 1, s: -2 }, 1],
		['m s⁻²', { m: 1, s: -2 }, 1],
		['mm', { m: 1 }, 1e-3],
		['N·m', { kg: 1, m: 2, s: -2 }, 1],
		['deg/s', { s: -1 }, Math.PI / 180],
		['kHz', { s: -1 }, 1000],
		['min', { s: 1 }, 60],
		['1/s', { s: -1 }, 1],
		['N²', { kg: 2, m: 2, s: -4 }, 1],
		['', {}, 1]
	])('%s', (text, powers, size) => {
		const read = readUnit(text);
		expect(read?.powers).toEqual(powers);
		expect(read?.size).toBeCloseTo(size, 12);
	});

	it('writes base units with raised exponents', () => {
		expect(writeKind(readUnit('N/m') ?? { powers: {}, size: 1 })).toBe('kg·s⁻²');
		expect(writeKind({ powers: {}, size: 1 })).toBe('no unit');
	});
});
