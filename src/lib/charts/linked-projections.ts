import type { ChartTable } from './chart-table';
import type { Axis, CloudData, EllipseKind } from './cloud-data';
import { projectEllipsoid, type Ellipsoid } from './ellipse-path';

/** A cloud of three and more variables with its ellipsoids. */
export interface Projections {
	readonly axes: readonly Axis[];
	/** One row a trial, in the order of the axes. */
	readonly trials: readonly (readonly number[])[];
	readonly ellipsoids: readonly (Ellipsoid & { kind: EllipseKind; label?: string })[];
}

/** Every pair of variables as a picture of its own; the first of a pair runs to the right. */
export function listPanels({ axes, trials, ellipsoids }: Projections): CloudData[] {
	return axes.flatMap((x, i) =>
		axes.slice(i + 1).map((y, k) => {
			const j = i + 1 + k;
			return {
				x,
				y,
				grid: null,
				zeroSet: [],
				tolerance: null,
				result: { unit: '', factor: 1 },
				trials: trials.map((trial) => [trial[i] ?? Number.NaN, trial[j] ?? Number.NaN] as const),
				ellipses: ellipsoids.map(({ kind, ...ellipsoid }) => ({
					...projectEllipsoid(ellipsoid, i, j),
					kind
				}))
			};
		})
	);
}

/** Center and reach of each ellipsoid along each variable, then the trials. */
export function tabulateEllipsoid({ axes, trials, ellipsoids }: Projections): ChartTable {
	const short = (value: number) => Number(value.toPrecision(5));
	const reach = (ellipsoid: Ellipsoid, index: number) =>
		Math.sqrt(ellipsoid.shape[index]?.[index] ?? Number.NaN);
	return {
		columns: ['what', ...axes.map(({ label, unit }) => (unit ? `${label}, ${unit}` : label))],
		rows: [
			...ellipsoids.flatMap((ellipsoid) => [
				[`${ellipsoid.label ?? ellipsoid.kind}, center`, ...ellipsoid.center.map(short)],
				[
					`${ellipsoid.label ?? ellipsoid.kind}, reach ±`,
					...axes.map((_, index) => short(reach(ellipsoid, index)))
				]
			]),
			...trials.map((trial, index) => [`trial ${index + 1}`, ...trial.map(short)])
		]
	};
}
