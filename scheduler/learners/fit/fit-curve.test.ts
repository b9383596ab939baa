import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createSeededStream } from '../../random/seeded-stream.ts';
import { drawNormal } from '../../random/random-stream.ts';
import { computeStudentTQuantile } from '../../statistics/student-t.ts';
import { CURVE_FORMS, CURVE_KINDS } from './curve-models.ts';
import { compareCurves, fitFromStarts, fitLearningCurve } from './fit-curve.ts';
import { createFormulaModel } from './formula-model.ts';

const times = Array.from({ length: 40 }, (_, i) => i + 1);
/** Case learning-curve-exponential of the method sheet. */
const y = [1.2, 1.06, 1.13, 0.9, 0.86, 0.91, 0.75, 0.7, 0.72, 0.6, 0.66, 0.55, 0.52, 0.58];
y.push(0.47, 0.45, 0.5, 0.42, 0.4, 0.43, 0.36, 0.39, 0.35, 0.33, 0.37, 0.32, 0.3, 0.34, 0.31);
y.push(0.28, 0.3, 0.29, 0.26, 0.3, 0.27, 0.28, 0.25, 0.27, 0.26, 0.25);

describe('fitLearningCurve', () => {
	it('gives the exponential of R nls with its standard errors', () => {
		const model = createFormulaModel({
			...{ formula: 'A + B*exp(-k*(t-1))', time: 't', parameters: ['A', 'B', 'k'] }
		});
		const fit = fitFromStarts({ model, times, values: y, starts: [[0.2, 1, 0.1]] });
		if (!fit.ok) throw new Error(fit.reason);
		const wanted = [
			[0.233688138722643, 0.0153973836842628],
			[0.957818357938473, 0.0208430237522473],
			[0.0928116834871484, 0.0055197735493735]
		];
		fit.parameters.forEach(({ value, standardError }, i) => {
			// nls stops at a relative offset of 1e-5 of a standard error.
			expect(value).toBeCloseTo(wanted[i]?.[0] ?? 0, 5);
			expect(standardError).toBeCloseTo(wanted[i]?.[1] ?? 0, 5);
		});
		expect(fit.rss).toBeCloseTo(0.0459775093301852, 10);
		expect(fit.sigma).toBeCloseTo(0.0352510338472831, 10);
	});

	it('has slopes that agree with differences in every form', () => {
		for (const kind of CURVE_KINDS) {
			const form = CURVE_FORMS[kind];
			const at = form.names.map((_, j) => 0.3 + 0.17 * j);
			form.slopes(2.5, at).forEach((slope, j) => {
				const shift = (h: number) => at.map((value, i) => (i === j ? value + h : value));
				const rise = (form.value(2.5, shift(1e-6)) - form.value(2.5, shift(-1e-6))) / 2e-6;
				expect(slope).toBeCloseTo(rise, 7);
			});
		}
	});

	it('finds every form again in exact data, also when rates lie close', { timeout: 30_000 }, () => {
		const planted = {
			exponential: [0.2, 1, 0.12],
			power: [0.1, 1.5, 0.7],
			mixed: [0.2, 1.4, 0.05, 0.3],
			'two-phase': [0.2, 0.8, 0.6, 0.5, 0.05]
		};
		for (const kind of CURVE_KINDS) {
			const values = times.map((t) => CURVE_FORMS[kind].value(t, planted[kind]));
			const fit = fitLearningCurve({ kind, times, values, level: null });
			if (!fit.ok) throw new Error(`${kind}: ${fit.reason}`);
			fit.parameters.forEach(({ value }, j) => expect(value).toBeCloseTo(planted[kind][j] ?? 0, 5));
		}
	});

	it('has profile intervals that are the t intervals where the model is a straight line', () => {
		const model = createFormulaModel({ formula: 'a + b*t', time: 't', parameters: ['a', 'b'] });
		const fit = fitFromStarts({ model, times, values: y, starts: [[0, 0]] });
		if (!fit.ok) throw new Error(fit.reason);
		const t = computeStudentTQuantile(0.975, 38);
		for (const { value, standardError, interval } of fit.parameters) {
			expect(interval?.low).toBeCloseTo(value - t * standardError, 6);
			expect(interval?.high).toBeCloseTo(value + t * standardError, 6);
		}
	});

	it('covers the true rate in about 95 of 100 series', { timeout: 60_000 }, () => {
		const stream = createSeededStream(11);
		const count = 120;
		const covered = Array.from({ length: count }, () => {
			const values = times.map((t) => 0.3 + Math.exp(-0.12 * t) + 0.08 * drawNormal(stream));
			const fit = fitLearningCurve({ kind: 'exponential', times, values });
			const interval = fit.ok ? fit.parameters[2]?.interval : null;
			return (interval?.low ?? -9) <= 0.12 && 0.12 <= (interval?.high ?? 9);
		}).filter(Boolean).length;
		// .95 less three standard errors of 120 series.
		expect(covered / count).toBeGreaterThan(0.89);
	});

	it('leaves an end open where the data do not bound a parameter', () => {
		const values = times.map((_, i) => (i === 0 ? 1 : 0.2 + 0.001 * Math.sin(i)));
		const fit = fitLearningCurve({ kind: 'exponential', times, values });
		if (fit.ok) expect(fit.parameters[2]?.interval?.high).toBeNull();
		else expect(['not-converged', 'not-identified']).toContain(fit.reason);
	});

	it('refuses a flat series, too few values and a time without a power', () => {
		const flat = times.map(() => 0.4);
		expect(fitLearningCurve({ kind: 'exponential', times, values: flat }).ok).toBe(false);
		expect(fitLearningCurve({ kind: 'exponential', times: [1, 2, 3], values: [3, 2, 1] })).toEqual({
			...{ ok: false, reason: 'too-few' }
		});
		expect(
			fitLearningCurve({ kind: 'power', times: [0, 1, 2, 3, 4], values: [5, 4, 3, 2, 1] })
		).toEqual({ ok: false, reason: 'time-out-of-range' });
	});

	it('never lets NaN out', { timeout: 60_000 }, () => {
		const series = fc.array(fc.double({ min: -1e3, max: 1e3, noNaN: true }), {
			...{ minLength: 6, maxLength: 12 }
		});
		fc.assert(
			fc.property(series, fc.constantFrom(...CURVE_KINDS), (values, kind) => {
				const at = values.map((_, i) => i + 1);
				const fit = fitLearningCurve({ kind, times: at, values, level: null });
				if (!fit.ok) return;
				for (const { value, standardError } of fit.parameters)
					expect([value, standardError].every(Number.isFinite)).toBe(true);
			}),
			{ numRuns: 40, seed: 5 }
		);
	});
});

describe('compareCurves', () => {
	it('puts the form that made the data first', () => {
		const stream = createSeededStream(3);
		const values = times.map((t) => 0.2 + 2 * t ** -0.8 + 0.02 * drawNormal(stream));
		const { fits } = compareCurves({ kinds: ['exponential', 'power'], times, values });
		expect(fits.map(({ kind }) => kind)).toEqual(['power', 'exponential']);
	});
});
