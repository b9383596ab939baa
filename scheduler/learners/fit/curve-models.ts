import { entry, type Vector } from '../../linear-algebra/vector.ts';
import type { CurveModel } from './least-squares.ts';

/** Forms of a learning curve: how the error falls with practice. */
export const CURVE_KINDS = ['exponential', 'power', 'mixed', 'two-phase'] as const;
export type CurveKind = (typeof CURVE_KINDS)[number];

/**
 * A learning curve: level A, and gains that are linear in it once the rates are known. `shapes` gives
 * each gain's course at a time and its slopes by the rates.
 */
export interface CurveForm extends CurveModel {
	/** Count of gains (B); the parameters are A, the gains, the rates. */
	readonly gainCount: number;
	/** Lowest time the form is defined at, not included. */
	readonly timeAbove: number;
	courses(time: number, rates: Vector): Course[];
}

interface Course {
	readonly value: number;
	/** By each rate of the form. */
	readonly slopes: Vector;
}

function createForm(options: {
	gains: readonly string[];
	rates: readonly string[];
	timeAbove: number;
	courses: CurveForm['courses'];
}): CurveForm {
	const { gains, rates, courses, timeAbove } = options;
	const split = (parameters: Vector) => ({
		level: entry(parameters, 0),
		sizes: parameters.slice(1, 1 + gains.length),
		pace: parameters.slice(1 + gains.length)
	});
	return {
		names: ['A', ...gains, ...rates],
		gainCount: gains.length,
		timeAbove,
		courses,
		value: (time, parameters) => {
			const { level, sizes, pace } = split(parameters);
			return courses(time, pace).reduce(
				(sum, { value }, i) => sum + entry(sizes, i) * value,
				level
			);
		},
		slopes: (time, parameters) => {
			const { sizes, pace } = split(parameters);
			const found = courses(time, pace);
			const byRate = rates.map((_, j) =>
				found.reduce((sum, { slopes }, i) => sum + entry(sizes, i) * entry(slopes, j), 0)
			);
			return [1, ...found.map(({ value }) => value), ...byRate];
		}
	};
}

/**
 * The forms of a learning curve over trial or block number t.
 *
 * exponential A + B·e^(−k·t); power A + B·t^(−k); mixed A + B·e^(−k·t)·t^(−c);
 * two-phase A + B₁·e^(−k₁·t) + B₂·e^(−k₂·t).
 * Source:  method sheet C (Curves).
 */
export const CURVE_FORMS: Readonly<Record<CurveKind, CurveForm>> = {
	exponential: createForm({
		...{ gains: ['B'], rates: ['k'], timeAbove: Number.NEGATIVE_INFINITY },
		courses: (t, [k = 0]) => [decay(t, k)]
	}),
	power: createForm({
		...{ gains: ['B'], rates: ['k'], timeAbove: 0 },
		courses: (t, [k = 0]) => [{ value: t ** -k, slopes: [-Math.log(t) * t ** -k] }]
	}),
	mixed: createForm({
		...{ gains: ['B'], rates: ['k', 'c'], timeAbove: 0 },
		courses: (t, [k = 0, c = 0]) => {
			const value = Math.exp(-k * t) * t ** -c;
			return [{ value, slopes: [-t * value, -Math.log(t) * value] }];
		}
	}),
	'two-phase': createForm({
		...{ gains: ['B1', 'B2'], rates: ['k1', 'k2'], timeAbove: Number.NEGATIVE_INFINITY },
		courses: (t, [k1 = 0, k2 = 0]) => {
			const [fast, slow] = [decay(t, k1), decay(t, k2)];
			return [
				{ value: fast.value, slopes: [...fast.slopes, 0] },
				{ value: slow.value, slopes: [0, ...slow.slopes] }
			];
		}
	})
};

function decay(t: number, k: number): Course {
	const value = Math.exp(-k * t);
	return { value, slopes: [-t * value] };
}
