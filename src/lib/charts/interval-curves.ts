import type { ChartTable } from './chart-table';

export interface IntervalPoint {
	readonly x: number;
	readonly y: number;
	readonly low: number;
	readonly high: number;
	/** How many stand behind it: "3 of 1,243". */
	readonly from: string;
}

export interface IntervalLine {
	readonly name: string;
	readonly tone: 'spruce' | 'iris' | 'persimmon' | 'ink';
	readonly points: readonly IntervalPoint[];
}

/** Values with their intervals over a setting. */
export interface IntervalCurvesData {
	readonly lines: readonly IntervalLine[];
	readonly xLabel: string;
	readonly yLabel: string;
	/** The value that is planned: a line across. */
	readonly planned: { readonly x: number; readonly label: string } | null;
	/** A goal on the other axis: a dashed line. */
	readonly goal: { readonly y: number; readonly label: string } | null;
	/** Writes a value of y. */
	readonly write: (y: number) => string;
	/** What low and high are, in the table: "95 % interval". */
	readonly spread: string;
}

/** The table behind the picture: one row a value and line. */
export function tabulateCurves({
	lines,
	xLabel,
	yLabel,
	write,
	spread
}: IntervalCurvesData): ChartTable {
	return {
		columns: [xLabel, 'of', yLabel, spread, 'from'],
		rows: lines.flatMap(({ name, points }) =>
			points.map(({ x, y, low, high, from }) => [
				String(x),
				name,
				write(y),
				`${write(low)} to ${write(high)}`,
				from
			])
		)
	};
}

/** Largest value to be drawn, with some air above it; 1 where nothing is known. */
export function findTop({ lines, goal }: IntervalCurvesData): number {
	const highs = lines.flatMap(({ points }) => points.map(({ high }) => high));
	const top = Math.max(goal?.y ?? 0, ...highs);
	return top > 0 ? top * 1.08 : 1;
}
