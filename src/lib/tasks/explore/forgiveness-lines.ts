import { entry } from '$scheduler/linear-algebra/vector';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import type { ChartTable } from '$lib/charts/chart-table';
import type { ForgivingPoint } from './forgiveness';

export interface ForgivingLine {
	readonly key: string;
	readonly points: readonly {
		readonly x: number;
		readonly share: number;
		readonly at: readonly number[];
	}[];
	/** The best place of the line. */
	readonly best: { readonly x: number; readonly share: number };
}

/** What lines forgive over one variable, the longest lines first. */
export function listForgivingLines(
	branches: readonly (readonly ForgivingPoint[])[],
	axis: number
): ForgivingLine[] {
	return [...branches]
		.sort((a, b) => (b.at(-1)?.length ?? 0) - (a.at(-1)?.length ?? 0))
		.slice(0, 4)
		.map((branch, index) => {
			const points = branch.map(({ at, share }) => ({ x: entry(at, axis), share, at }));
			const best = points.reduce((top, point) => (point.share > top.share ? point : top));
			return { key: `line ${index + 1}`, points, best };
		});
}

/** The variable in which the lines reach farthest, in scales: a line runs along it without turning back much. */
export function chooseForgivingAxis(
	branches: readonly (readonly ForgivingPoint[])[],
	record: TaskRecord,
	axes: readonly number[]
): number {
	const reach = (axis: number) => {
		const scale = record.variables[axis]?.scale ?? 1;
		return branches.reduce((sum, branch) => {
			const values = branch.map(({ at }) => entry(at, axis));
			return sum + (Math.max(...values) - Math.min(...values)) / scale;
		}, 0);
	};
	return axes.reduce((best, axis) => (reach(axis) > reach(best) ? axis : best), axes[0] ?? 0);
}

export function tabulateForgiveness(
	lines: readonly ForgivingLine[],
	{ variables }: TaskRecord
): ChartTable {
	return {
		columns: [
			'line',
			'share within tolerance',
			...variables.map(({ name, unit }) => `${name}, ${unit}`)
		],
		rows: lines.flatMap(({ key, points }) =>
			points.map(({ share, at }) => [
				...[key, Number(share.toFixed(3))],
				...at.map((value) => Number(value.toPrecision(5)))
			])
		)
	};
}
