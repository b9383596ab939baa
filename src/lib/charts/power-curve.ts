import type { ChartTable } from './chart-table';
import { formatShare } from './format-ticks';

export interface PowerPoint {
	/** People per arm. */
	readonly n: number;
	readonly power: number;
}

export interface PowerLine {
	readonly key: string;
	/** Beside its value at the marker; without it the line is not named in the picture. */
	readonly label?: string | undefined;
	/** In the table: "both losses, simulated". */
	readonly name: string;
	readonly tone: 'ink' | 'persimmon' | 'iris' | 'muted';
	readonly style: 'solid' | 'dashed' | 'dots';
	readonly points: readonly PowerPoint[];
	/** Interval of a simulated line. */
	readonly band?: readonly { n: number; low: number; high: number }[] | undefined;
}

export interface PowerCurveData {
	readonly curves: readonly PowerLine[];
	/** What is planned: 30 with "planned: 30 per arm". */
	readonly marker: { readonly n: number; readonly label: string } | null;
	/** The power wanted, a dashed line. */
	readonly wanted: number;
	readonly xLabel: string;
	/** Columns of the table; all points of the first curve when left out. */
	readonly tableAt?: readonly number[] | undefined;
}

/** Power at a count of people, between two points in proportion; null outside the curve. */
export function powerAt(points: readonly PowerPoint[], n: number): number | null {
	const after = points.findIndex((point) => point.n >= n);
	const [before, next] = [points[after - 1], points[after]];
	if (!next) return null;
	if (next.n === n) return next.power;
	if (!before) return null;
	return before.power + ((n - before.n) / (next.n - before.n)) * (next.power - before.power);
}

/** The table behind the picture: one row a line, one column a count of people. */
export function tabulatePower({ curves, tableAt }: PowerCurveData): ChartTable {
	const counts = tableAt ?? curves[0]?.points.map((point) => point.n) ?? [];
	return {
		columns: ['per arm', ...counts.map(String)],
		rows: curves.map((curve) => [
			curve.name,
			...counts.map((n) => {
				const power = powerAt(curve.points, n);
				return power === null ? '–' : formatShare(power);
			})
		])
	};
}
