import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { fitFromStarts } from '../../scheduler/learners/fit/fit-curve.ts';
import { createFormulaModel } from '../../scheduler/learners/fit/formula-model.ts';

/** NIST StRD certified values, see tests/data/nist_learning/PROVENANCE.md. */
const folder = new URL('../data/nist_learning/', import.meta.url);
const read = (name: string) => readFileSync(new URL(name, folder), 'utf8');

const parameterSchema = z.object({
	start1: z.number(),
	start2: z.number(),
	value: z.number(),
	se: z.number()
});
const problemSchema = z.object({
	model: z.string(),
	parameters: z.record(z.string(), parameterSchema),
	rss: z.number(),
	residual_sd: z.number(),
	df: z.number()
});
const problems = Object.entries(
	z.record(z.string(), problemSchema).parse(JSON.parse(read('expected.json')))
);
/** Digits that the sums of exponentials leave. */
const HARD = ['lanczos3', 'mgh17'];

function fit(name: string, problem: z.output<typeof problemSchema>, from: 'start1' | 'start2') {
	const rows = read(`${name}.csv`)
		.trim()
		.split(/\r?\n/)
		.slice(1)
		.map((line) => line.split(',').map(Number));
	const parameters = Object.keys(problem.parameters);
	return fitFromStarts({
		model: createFormulaModel({
			formula: problem.model.replace(/^y *= */, ''),
			...{ time: 'x', parameters }
		}),
		times: rows.map(([x = NaN]) => x),
		values: rows.map(([, y = NaN]) => y),
		starts: [Object.values(problem.parameters).map((parameter) => parameter[from])],
		level: null
	});
}

const near = (value: number, wanted: number, relative: number) =>
	expect(Math.abs(value - wanted)).toBeLessThanOrEqual(relative * Math.abs(wanted));

describe('least squares on certified problems', () => {
	it.each(problems)('finds %s from its second start', (name, problem) => {
		const found = fit(name, problem, 'start2');
		expect(found.ok).toBe(true);
		if (!found.ok) return;
		const digits = HARD.includes(name) ? 1e-4 : 1e-6;
		for (const { name: parameter, value, standardError } of found.parameters) {
			const wanted = problem.parameters[parameter];
			near(value, wanted?.value ?? NaN, digits);
			near(standardError, wanted?.se ?? NaN, digits);
		}
		near(found.rss, problem.rss, digits);
		near(found.sigma, problem.residual_sd, digits);
		expect(found.df).toBe(problem.df);
	});

	it.each(problems)(
		'from the far start of %s ends at the certified sum or says so',
		(name, problem) => {
			const found = fit(name, problem, 'start1');
			if (found.ok) near(found.rss, problem.rss, 1e-4);
			else expect(['not-converged', 'not-identified']).toContain(found.reason);
		}
	);
});
