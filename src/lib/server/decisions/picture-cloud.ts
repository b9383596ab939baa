import { extent } from 'd3-array';
import type { CloudData, DrawnEllipse, Point } from '$lib/charts/cloud-data';
import type { Projections } from '$lib/charts/linked-projections';
import type { DecisionRecord } from '$scheduler/policies/decision-record';
import { placedRegionSchema } from '$scheduler/perturbations/region-settings';
import { createTask } from '$scheduler/tasks/create-task';
import { evaluateErrorGrid } from '$scheduler/tasks/error-grid';
import { projectToManifold } from '$scheduler/tasks/project-to-manifold';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { traceManifold } from '$scheduler/tasks/trace-manifold';
import { traceZeroSet } from '$scheduler/tasks/trace-zero-set';
import { computeNextTrialFactor } from '$scheduler/variability/ellipsoid-factors';
import { computeCovariance, computeMeanVector } from '$scheduler/variability/moments';

/** Share of the next trials that the drawn ellipse is expected to hold. */
export const drawnShare = 0.68;

export type CloudPicture =
	| { kind: 'plane'; data: CloudData; trialCount: number }
	| { kind: 'projections'; data: Projections; trialCount: number }
	| { kind: 'none'; trialCount: number };

/** What is drawn of a decision: its trials with their ellipsoid, the region and the expected way out. */
export function pictureCloud(record: DecisionRecord): CloudPicture {
	const { task } = record.inputs;
	const trials = record.inputs.state.last?.trials ?? [];
	const trialCount = trials.length;
	if (trialCount <= task.variables.length + 1) return { kind: 'none', trialCount };
	const own = describeOwn(trials);
	if (!own) return { kind: 'none', trialCount };
	if (task.variables.length === 2) {
		return { kind: 'plane', data: picturePlane(record, trials, own), trialCount };
	}
	const axes = task.variables.map((variable, index) => ({
		label: readable(variable.name),
		unit: variable.unit,
		domain: widen(trials.map((trial) => trial[index] ?? Number.NaN))
	}));
	const ellipsoids = [{ ...own, kind: 'own' as const }];
	return { kind: 'projections', data: { axes, trials, ellipsoids }, trialCount };
}

type Own = { center: number[]; shape: number[][] };

/** Ellipsoid of the next trial in the task's units; null when the cloud is flat. */
function describeOwn(trials: number[][]): Own | null {
	const covariance = computeCovariance(trials);
	if (covariance.some((row, index) => !((row[index] ?? 0) > 0))) return null;
	const factor = computeNextTrialFactor({
		trialCount: trials.length,
		variableCount: covariance.length,
		probability: drawnShare
	});
	const shape = covariance.map((row) => row.map((value) => value * factor));
	return { center: computeMeanVector(trials), shape };
}

function picturePlane(record: DecisionRecord, trials: number[][], own: Own): CloudData {
	const { task: taskRecord } = record.inputs;
	const [first, second] = taskRecord.variables;
	if (!first || !second) throw new RangeError('a plane requires two variables');
	const task = createTask(taskRecord);
	const way = pictureWay(record, own);
	const ellipses: DrawnEllipse[] = [{ ...toPlane(own), kind: 'own' }, ...way.ellipses];
	const points = trials.map((trial): Point => [trial[0] ?? Number.NaN, trial[1] ?? Number.NaN]);
	const corners = [...points, ...ellipses.flatMap(listCorners)];
	const x = {
		label: readable(first.name),
		unit: first.unit,
		domain: widen(corners.map((p) => p[0]))
	};
	const y = {
		label: readable(second.name),
		unit: second.unit,
		domain: widen(corners.map((p) => p[1]))
	};
	const window = { x: x.domain, y: y.domain };
	return {
		x,
		y,
		grid: evaluateErrorGrid(task, window, 61, 61),
		zeroSet: traceZeroSet(task, window),
		tolerance: task.tolerance,
		result: describeResult(task.resultUnit),
		trials: points,
		ellipses,
		arrow: way.arrow,
		zeroLabel: 'zero error'
	};
}

/** The penalized region and where the person is expected to go, in the task's units. */
function pictureWay(
	record: DecisionRecord,
	own: Own
): { ellipses: DrawnEllipse[]; arrow: CloudData['arrow'] } {
	const region = placedRegionSchema.safeParse(record.parameters.region);
	if (!region.success) return { ellipses: [], arrow: null };
	const { variables } = record.inputs.task;
	const toUnits = (shape: number[][]) => scaleShape(shape, variables);
	const { share, shape, centerInUnits, k, nearest } = region.data;
	const drawn: DrawnEllipse = {
		...toPlane({ center: centerInUnits, shape: toUnits(shape) }),
		kind: 'region',
		label: `penalized region, catches ${Math.round(share * 100)} %`
	};
	const exit = findExit(record, { center: region.data.center, shape, k, nearest });
	if (!exit) return { ellipses: [drawn], arrow: null };
	const expected: DrawnEllipse = {
		...toPlane({ center: exit, shape: own.shape }),
		kind: 'expected',
		label: 'expected way out'
	};
	return { ellipses: [drawn, expected], arrow: { from: drawn.center, to: expected.center } };
}

type PlacedCloud = { center: number[]; shape: number[][]; k: number; nearest: number };

/** The point of the manifold at the nearest way out, in the task's units. */
function findExit(
	record: DecisionRecord,
	{ center, shape, k, nearest }: PlacedCloud
): number[] | null {
	const task = createScaledTask(createTask(record.inputs.task));
	const covariance = shape.map((row) => row.map((value) => value / (k * k)));
	const start = projectToManifold({ task, mean: center, covariance });
	if (!start.ok) return null;
	const { step } = record.inputs.protocol.place;
	const trace = traceManifold(task, start.point, { length: Math.abs(nearest) + step, step });
	const branch = nearest >= 0 ? trace.plus : trace.minus;
	const found = branch.find((point) => Math.abs(point.s) >= Math.abs(nearest) - step / 2);
	return found ? task.toUnits(found.z) : null;
}

function scaleShape(shape: number[][], variables: TaskRecord['variables']): number[][] {
	return shape.map((row, i) =>
		row.map((value, j) => value * (variables[i]?.scale ?? 1) * (variables[j]?.scale ?? 1))
	);
}

function toPlane({ center, shape }: Own): Pick<DrawnEllipse, 'center' | 'shape'> {
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

function readable(name: string): string {
	return name.replaceAll('_', ' ');
}
