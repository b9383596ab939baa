import { entry } from '$scheduler/linear-algebra/vector';
import { computeLinearSteps } from '$scheduler/tasks/linear-steps';
import type { ChartTable } from '$lib/charts/chart-table';
import { formatFixed } from '$lib/charts/format-ticks';
import { cutAt } from './compute-map';
import type { Explorer } from './explorer.svelte';
import { chooseResultWords } from './result-words';

const COLUMNS = 9;
const ROWS = 9;

/** The results behind an error map on a coarse grid; empty where a trial has no result. */
export function tabulateMap({ record, axes, point, window }: Explorer): ChartTable {
	const [x, y] = axes.map((axis) => record.variables[axis]);
	if (!x || !y || record.type === 'cart-pendulum') return tabulatePlace({ record, point });
	const task = cutAt({ record, axes, point });
	const { unit, factor, digits } = chooseResultWords(record);
	const xs = computeLinearSteps(window.x, COLUMNS);
	const ys = computeLinearSteps(window.y, ROWS).reverse();
	const short = (value: number) => Number(value.toPrecision(4));
	return {
		columns: [
			`result, ${unit || 'no unit'}, at ${y.name}, ${y.unit}`,
			...xs.map((value) => `${x.name} ${short(value)}`)
		],
		rows: ys.map((b) => [
			short(b),
			...xs.map((a) => {
				const result = task.evaluate([a, b]);
				return Number.isFinite(result) ? formatFixed(result * factor, digits) : '';
			})
		])
	};
}

/** Where a map of numbers would take seconds: the probe's own. */
function tabulatePlace({ record, point }: Pick<Explorer, 'record' | 'point'>): ChartTable {
	return {
		columns: ['variable', 'unit', 'probe', 'lowest', 'highest'],
		rows: record.variables.map(({ name, unit, min, max }, i) => [
			...[name, unit, entry(point, i), min, max]
		])
	};
}
