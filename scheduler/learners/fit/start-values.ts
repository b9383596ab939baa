import { Matrix as DenseMatrix, QrDecomposition } from 'ml-matrix';
import { entry, type Vector } from '../../linear-algebra/vector.ts';
import type { CurveForm, CurveKind } from './curve-models.ts';

const RATE_COUNT = 16;
/** Starts from which the fit is really tried. */
const KEPT = 4;

/**
 * Places from which a learning curve's fit is started, the most promising first.
 *
 * Method:  a grid over the rates; at each place level and gains by linear least squares.
 */
export function findStarts(options: {
	kind: CurveKind;
	form: CurveForm;
	times: Vector;
	values: Vector;
}): number[][] {
	const { form } = options;
	const tried = listRates(options).flatMap((rates) => {
		const solved = solveGains(options, rates);
		return solved ? [{ start: [...solved.sizes, ...rates], rss: solved.rss }] : [];
	});
	return tried
		.filter(({ start }) => start.length === form.names.length)
		.sort((a, b) => a.rss - b.rss)
		.slice(0, KEPT)
		.map(({ start }) => start);
}

function listRates({ kind, times }: { kind: CurveKind; times: Vector }): number[][] {
	const span = Math.max(...times) - Math.min(...times) || 1;
	const spaced = spaceEvenly(0.2 / span, (2 * times.length) / span);
	const exponents = spaceEvenly(0.05, 3);
	if (kind === 'exponential') return spaced.map((k) => [k]);
	if (kind === 'power') return exponents.map((k) => [k]);
	const coarse = spaced.filter((_, i) => i % 2 === 0);
	if (kind === 'mixed')
		return coarse.flatMap((k) =>
			[0, ...exponents.filter((_, i) => i % 3 === 0)].map((c) => [k, c])
		);
	return coarse.flatMap((fast) => coarse.filter((slow) => slow < fast).map((slow) => [fast, slow]));
}

/** On a logarithmic scale. */
function spaceEvenly(from: number, to: number): number[] {
	return Array.from({ length: RATE_COUNT }, (_, i) => from * (to / from) ** (i / (RATE_COUNT - 1)));
}

function solveGains(
	{ form, times, values }: { form: CurveForm; times: Vector; values: Vector },
	rates: Vector
): { sizes: number[]; rss: number } | null {
	const rows = times.map((time) => [1, ...form.courses(time, rates).map(({ value }) => value)]);
	if (!rows.every((parts) => parts.every(Number.isFinite))) return null;
	const factor = new QrDecomposition(new DenseMatrix(rows));
	if (!factor.isFullRank()) return null;
	const sizes = factor.solve(DenseMatrix.columnVector([...values])).to1DArray();
	const rss = rows.reduce(
		(sum, parts, i) =>
			sum +
			(entry(values, i) - parts.reduce((fitted, part, j) => fitted + part * entry(sizes, j), 0)) **
				2,
		0
	);
	return Number.isFinite(rss) ? { sizes, rss } : null;
}
