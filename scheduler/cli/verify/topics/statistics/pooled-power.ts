import { computeTPower } from '../../../../power/t-power.ts';

/** Two groups with one common variance, with or without the wrong tail. */
export function computePooledPower(design: {
	effectSize: number;
	n: number;
	n2?: number;
	alpha: number;
	sides: 1 | 2;
	strict: boolean;
}): number {
	const { effectSize, n, n2 = n, ...test } = design;
	if (!(n >= 2 && n2 >= 2)) throw new RangeError(`groups need two people, got ${n} and ${n2}`);
	return computeTPower({
		...test,
		ncp: effectSize * Math.sqrt((n * n2) / (n + n2)),
		df: n + n2 - 2
	});
}
