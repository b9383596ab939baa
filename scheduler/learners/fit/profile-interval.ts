import { entry } from '../../linear-algebra/vector.ts';
import { computeStudentTQuantile } from '../../statistics/student-t.ts';
import { fitLeastSquares, type FitRequest } from './least-squares.ts';

/** Null: the data do not bound the parameter on that side. */
export interface ProfileInterval {
	readonly low: number | null;
	readonly high: number | null;
}

const STEPS_MAX = 60;
const HALVINGS = 60;
/** Part of a standard error to which the ends are found. */
const END_TOLERANCE = 1e-7;

/**
 * Interval of one parameter of a fitted curve from its profile: all values at which the best fit of the
 * others is not worse than chance allows.
 *
 * Shapes:  request as it was fitted; parameters (p), place of the parameter.
 * Units:   those of the parameter.
 * Method:  RSS(value) ≤ RSS·(1 + t² / (n − p)); walked outward in steps of half a standard error, each
 *          fit started from the last, then halved down.
 * Source:  D. M. Bates and D. G. Watts, Nonlinear Regression Analysis (1988), chapter 6.
 * Accuracy: 1e-7 standard errors; equals the t interval for a straight line (fit-curve.test.ts).
 */
export function computeProfileInterval(options: {
	request: FitRequest;
	parameters: readonly number[];
	rss: number;
	place: number;
	standardError: number;
	level: number;
}): ProfileInterval {
	const { request, parameters, rss, level } = options;
	const freedom = request.times.length - parameters.length;
	const t = computeStudentTQuantile((1 + level) / 2, freedom);
	const limit = rss * (1 + (t * t) / freedom);
	return { low: findEnd(options, limit, -1), high: findEnd(options, limit, 1) };
}

type Walk = Parameters<typeof computeProfileInterval>[0];

function findEnd(walk: Walk, limit: number, side: 1 | -1): number | null {
	const { parameters, place, standardError } = walk;
	let inside = { value: entry(parameters, place), parameters: [...parameters] };
	let step = standardError / 2;
	for (let i = 0; i < STEPS_MAX; i++) {
		const value = inside.value + side * step;
		const found = refit(walk, value, inside.parameters);
		if (!found) return null;
		if (found.rss > limit) return halve(walk, { limit, inside, outside: value });
		inside = { value, parameters: found.parameters };
		step *= i < 10 ? 1 : 1.5;
	}
	return null;
}

function halve(
	walk: Walk,
	start: { limit: number; inside: { value: number; parameters: number[] }; outside: number }
): number | null {
	let { inside, outside } = start;
	for (let i = 0; i < HALVINGS; i++) {
		if (Math.abs(outside - inside.value) <= END_TOLERANCE * walk.standardError) break;
		const value = (inside.value + outside) / 2;
		const found = refit(walk, value, inside.parameters);
		if (!found) return null;
		if (found.rss > start.limit) outside = value;
		else inside = { value, parameters: found.parameters };
	}
	return (inside.value + outside) / 2;
}

function refit({ request, place }: Walk, value: number, near: readonly number[]) {
	const start = near.map((known, j) => (j === place ? value : known));
	const fit = fitLeastSquares({ ...request, start, fixed: place });
	return fit.ok ? fit : null;
}
