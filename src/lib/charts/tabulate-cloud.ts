import type { ChartTable } from './chart-table';
import type { Axis, CloudData, EllipseKind } from './cloud-data';

const kinds: Record<EllipseKind, string> = {
	own: 'own ellipse',
	region: 'penalized region',
	expected: 'expected way out',
	other: 'other ellipse'
};

/** The numbers of a cloud picture: each ellipse with its extent, each trial, each place and limit. */
export function tabulateCloud(data: CloudData): ChartTable {
	const name = (axis: Axis) => (axis.unit ? `${axis.label}, ${axis.unit}` : axis.label);
	const ellipses = data.ellipses.map(({ kind, label, center, shape }) => [
		label ?? kinds[kind],
		short(center[0]),
		short(center[1]),
		short(Math.sqrt(shape[0][0])),
		short(Math.sqrt(shape[1][1]))
	]);
	const places = (data.places ?? []).map(({ at, label }) => [
		label,
		short(at[0]),
		short(at[1]),
		'',
		''
	]);
	const trials = data.trials.map(([x, y], index) => [
		`trial ${index + 1}`,
		short(x),
		short(y),
		'',
		''
	]);
	return {
		columns: ['what', name(data.x), name(data.y), `± ${data.x.label}`, `± ${data.y.label}`],
		rows: [...ellipses, ...places, ...trials]
	};
}

/** Five significant digits, as a plain number. */
function short(value: number): number {
	return Number(value.toPrecision(5));
}
