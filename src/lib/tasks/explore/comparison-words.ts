import type { TaskRecord } from '$scheduler/tasks/task-record';
import { formatFixed, formatShare } from '$lib/charts/format-ticks';
import type { CloudComparison, MeasurePair } from './compare-cloud';
import { chooseResultWords } from './result-words';

export interface ComparisonRow {
	readonly label: string;
	readonly first: string;
	readonly second: string;
	/** Whether the number depends on the axes so much that they have to be named. */
	readonly dependsOnAxes: boolean;
}

const none = '–';

/** The numbers of one cloud in two coordinate systems, row by row. */
export function listComparison(found: CloudComparison, record: TaskRecord): ComparisonRow[] {
	const { unit, factor, digits } = chooseResultWords(record);
	const behind = unit ? `, ${unit}` : '';
	const cost = (value: number | null) =>
		value === null ? none : formatFixed(value * factor, Math.max(1, digits));
	const row = (label: string, pair: MeasurePair, write: (value: number | null) => string) => ({
		...{ label, first: write(pair.first), second: write(pair.second) },
		dependsOnAxes: isFarApart(pair)
	});
	const mean = cost(found.meanMiss);
	return [
		{ label: `mean miss${behind}`, first: mean, second: mean, dependsOnAxes: false },
		row(`noise cost${behind}`, found.noise, cost),
		row('along : across', found.alongAcross, (value) =>
			value === null ? none : formatFixed(value, 1)
		),
		row(`covariation cost${behind}`, found.covariation, cost),
		row('correlation', found.correlation, (value) => (value === null ? none : formatShare(value)))
	];
}

/** More than a quarter of the larger size, or of another sign. */
function isFarApart({ first, second }: MeasurePair): boolean {
	if (first === null || second === null) return false;
	const size = Math.max(Math.abs(first), Math.abs(second));
	return Math.abs(first - second) > 0.25 * size && size > 1e-9;
}

/** What the second system does to the results, in sentences. */
export function tellComparison(
	found: CloudComparison,
	record: TaskRecord,
	phrase: string
): string[] {
	const { unit, factor, digits } = chooseResultWords(record);
	const write = (value: number) => formatFixed(value * factor, Math.max(1, digits));
	const { covariation, noise, alongAcross } = found;
	if (found.secondTrials === null)
		return [`Some of these trials cannot be written ${phrase}: that system has no place for them.`];
	const sentences: string[] = [];
	if (covariation.first !== null && covariation.second !== null) {
		const [a, b] = [write(covariation.first), write(covariation.second)];
		const turn =
			a === b ? 'stays at' : covariation.second < covariation.first ? 'falls from' : 'rises from';
		sentences.push(
			a === b
				? `Covariation cost ${turn} ${a} ${unit} when the same trials are written ${phrase}.`
				: `Covariation cost ${turn} ${a} to ${b} ${unit} when the same trials are written ${phrase}.`
		);
	}
	const moves = [
		tellChange('noise cost', noise),
		tellChange('the ratio of spread along and across', alongAcross)
	];
	const told = moves.filter((text) => text !== '').join(', ');
	sentences.push(`The miss itself cannot change${told ? `; ${told}` : ''}.`);
	sentences.push(
		'So the protocol has to name its axes and scale before the first person is invited.'
	);
	return sentences;
}

function tellChange(name: string, { first, second }: MeasurePair): string {
	if (first === null || second === null || first === 0) return '';
	const percent = Math.round(100 * Math.abs(second / first - 1));
	return percent === 0 ? `${name} stays` : `${name} moves by ${percent} %`;
}
