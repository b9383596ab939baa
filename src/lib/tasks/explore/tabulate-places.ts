import type { ChartTable } from '$lib/charts/chart-table';
import type { Explorer } from './explorer.svelte';

const LINES: Readonly<Record<string, string>> = {
	way: 'way',
	after: 'way afterwards',
	body: 'body or device'
};
/** Places listed of one line at most. */
const PLACES_MAX = 20;

/** The places of the lines in a workspace picture: what is done, in the order in which it is done. */
export function tabulatePlaces({ scene }: Explorer): ChartTable {
	const short = (value: number) => Number(value.toPrecision(5));
	const lines = scene.shapes.flatMap((shape) =>
		shape.kind === 'line' && LINES[shape.look] ? [shape] : []
	);
	return {
		columns: ['what', 'place', 'x', 'y'],
		rows: lines.flatMap(({ points, look }) => {
			const every = Math.max(1, Math.ceil(points.length / PLACES_MAX));
			return points
				.filter((_, k) => k % every === 0 || k === points.length - 1)
				.map(([x, y], k) => [LINES[look] ?? '', k + 1, short(x), short(y)]);
		})
	};
}
