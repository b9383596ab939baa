import { extent } from 'd3-array';
import type { Axis, CloudData, DrawnEllipse, Point } from '$lib/charts/cloud-data';
import type { Projections } from '$lib/charts/linked-projections';
import { computeCholesky } from '$scheduler/linear-algebra/cholesky';
import type { DecisionRecord } from '$scheduler/policies/decision-record';
import { createTask } from '$scheduler/tasks/create-task';
import { evaluateErrorGrid } from '$scheduler/tasks/error-grid';
import { traceZeroSet } from '$scheduler/tasks/trace-zero-set';
import { computeNextTrialFactor } from '$scheduler/variability/ellipsoid-factors';
import { computeCovariance, computeMeanVector } from '$scheduler/variability/moments';
import { pictureWay, type InUnits } from './picture-way';

/** Share of the next trials that the drawn ellipse is expected to hold. */
export const drawnShare = 0.68;

export type CloudPicture =
	| { kind: 'plane'; data: CloudData; trialCount: number }
	| { kind: 'projections'; data: Projections; trialCount: number; note: string }
	| { kind: 'none'; trialCount: number; why: string };

/** What is drawn of a decision: its trials with their ellipsoid, the region and the expected way out. */
export function pictureCloud(record: DecisionRecord): CloudPicture {
	const { task } = record.inputs;
	const trials = record.inputs.state.last?.trials ?? [];
	const trialCount = trials.length;
	const none = (why: string): CloudPicture => ({ kind: 'none', trialCount, why });
	if (trialCount === 0) return none('no block came before this decision');
	if (task.variables.length === 1)
		return none('a task of one variable has no plane in which a cloud could be drawn');
	if (trialCount <= task.variables.length + 1)
		return none(`${trialCount} trials are too few for an ellipsoid`);
	const own = describeOwn(trials);
	if (!own) return none('the trials do not spread in every direction');
	if (task.variables.length === 2)
		return { kind: 'plane', data: picturePlane(record, trials, own), trialCount };
	const data = pictureProjections(record, trials, own);
	return { kind: 'projections', data, trialCount, note: describeSolutions(record) };
}

/** Ellipsoid of the next trial in the task's units; null when the cloud is flat in some direction. */
function describeOwn(trials: number[][]): InUnits | null {
	const covariance = computeCovariance(trials);
	if (!computeCholesky(covariance).ok) return null;
	const factor = computeNextTrialFactor({
		trialCount: trials.length,
		variableCount: covariance.length,
		probability: drawnShare
	});
	const shape = covariance.map((row) => row.map((value) => value * factor));
	return { center: computeMeanVector(trials), shape };
}

function pictureProjections(record: DecisionRecord, trials: number[][], own: InUnits): Projections {
	const { region, expected } = pictureWay(record, own);
	const ellipsoids = [
		{ ...own, kind: 'own' as const, label: 'own next trials' },
		...(region ? [{ ...region, kind: 'region' as const }] : []),
		...(expected ? [{ ...expected, kind: 'expected' as const, label: 'expected way out' }] : [])
	];
	const reach = ({ center, shape }: InUnits, index: number) => {
		const half = Math.sqrt(shape[index]?.[index] ?? 0);
		return [(center[index] ?? 0) - half, (center[index] ?? 0) + half];
	};
	const axes = record.inputs.task.variables.map(({ name, unit }, index) =>
		axisOf({ name, unit }, [
			...trials.map((trial) => trial[index] ?? Number.NaN),
			...ellipsoids.flatMap((ellipsoid) => reach(ellipsoid, index))
		])
	);
	return { axes, trials, ellipsoids };
}

/** What the shadows leave out: the solutions of a task of three and more variables. */
function describeSolutions(record: DecisionRecord): string {
	const { variableCount, resultCount } = createTask(record.inputs.task);
	const free = variableCount - resultCount;
	const form = free === 0 ? 'single points' : free === 1 ? 'a line' : 'a surface';
	const text = `perfect trials form ${form} in ${variableCount} variables, which the shadows cannot show.`;
	if (resultCount === 1) return `The ${text}`;
	return `${resultCount} results must be right at once: the ${text}`;
}

function picturePlane(record: DecisionRecord, trials: number[][], own: InUnits): CloudData {
	const { task: taskRecord } = record.inputs;
	const [first, second] = taskRecord.variables;
	if (!first || !second) throw new RangeError('a plane requires two variables');
	const task = createTask(taskRecord);
	const { region, expected } = pictureWay(record, own);
	const ellipses: DrawnEllipse[] = [
		{ ...toPlane(own), kind: 'own' },
		...(region ? [{ ...toPlane(region), kind: 'region' as const, label: region.label }] : []),
		...(expected
			? [{ ...toPlane(expected), kind: 'expected' as const, label: 'expected way out' }]
			: [])
	];
	const points = trials.map((trial): Point => [trial[0] ?? Number.NaN, trial[1] ?? Number.NaN]);
	const corners = [...points, ...ellipses.flatMap(listCorners)];
	const x = axisOf(
		first,
		corners.map((p) => p[0])
	);
	const y = axisOf(
		second,
		corners.map((p) => p[1])
	);
	const window = { x: x.domain, y: y.domain };
	// With several results the grid holds the distance, which has no change of sign to be followed.
	const isOneResult = task.resultCount === 1;
	return {
		x,
		y,
		grid: evaluateErrorGrid(task, window, 61, 61),
		zeroSet: isOneResult ? traceZeroSet(task, window) : [],
		tolerance: task.tolerance,
		result: describeResult(task.resultUnit),
		trials: points,
		ellipses,
		arrow:
			region && expected ? { from: toPlane(region).center, to: toPlane(expected).center } : null,
		zeroLabel: isOneResult ? 'zero error' : ''
	};
}

function toPlane({ center, shape }: InUnits): Pick<DrawnEllipse, 'center' | 'shape'> {
	const at = (i: number, j: number) => shape[i]?.[j] ?? Number.NaN;
	return {
		center: [center[0] ?? Number.NaN, center[1] ?? Number.NaN],
		shape: [
			[at(0, 0), at(0, 1)],
			[at(1, 0), at(1, 1)]
		]
	};
}

function listCorners({ center, shape }: DrawnEllipse): Point[] {
	const [dx, dy] = [Math.sqrt(shape[0][0]), Math.sqrt(shape[1][1])];
	return [
		[center[0] - dx, center[1] - dy],
		[center[0] + dx, center[1] + dy]
	];
}

function axisOf({ name, unit }: { name: string; unit: string }, values: number[]): Axis {
	return { label: name.replaceAll('_', ' '), unit, domain: widen(values) };
}

/** From a little below the smallest to a little above the largest value. */
function widen(values: number[]): [number, number] {
	const [low = 0, high = 1] = extent(values.filter(Number.isFinite)) as [number?, number?];
	const more = (high - low || 1) * 0.08;
	return [low - more, high + more];
}

function describeResult(unit: string) {
	if (unit === 'm') return { unit: 'cm', factor: 100, below: 'short', above: 'over' };
	return { unit, factor: 1 };
}
