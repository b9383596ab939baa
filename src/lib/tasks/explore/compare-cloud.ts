import { column, entry, type Matrix } from '$scheduler/linear-algebra/vector';
import { multiplyMatrices } from '$scheduler/linear-algebra/matrix';
import { createTask } from '$scheduler/tasks/create-task';
import { isHit, type Task } from '$scheduler/tasks/task';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import {
	compareCoordinates,
	type CoordinateMeasure
} from '$scheduler/variability/compare-coordinates';
import {
	convertExecutions,
	convertJacobian,
	createLinearSystem,
	createScaledSystem,
	type CoordinateSystem
} from '$scheduler/variability/coordinates';
import { computeMeanCost } from '$scheduler/variability/mean-cost';
import { computeCovariance, computeMeanVector } from '$scheduler/variability/moments';
import { computeManifoldVariance } from '$scheduler/variability/uncontrolled-manifold';
import { computeVariabilityCosts } from '$scheduler/variability/variability-costs';

/** A measure of one cloud in two coordinate systems; null where it cannot be taken. */
export interface MeasurePair {
	readonly first: number | null;
	readonly second: number | null;
}

/** What the axes do to the results of one and the same cloud. Costs in the unit of the result. */
export interface CloudComparison {
	readonly meanMiss: number | null;
	readonly hits: number;
	readonly trials: number;
	readonly noise: MeasurePair;
	readonly covariation: MeasurePair;
	/** Spread along the solutions over spread across them, both scaled. */
	readonly alongAcross: MeasurePair;
	/** Of the two variables that are shown. */
	readonly correlation: MeasurePair;
	/** The trials as the second system writes them; null: one of them cannot be written. */
	readonly secondTrials: readonly (readonly number[])[] | null;
}

interface Question {
	readonly record: TaskRecord;
	readonly trials: Matrix;
	readonly axes: readonly [number, number];
	readonly system: CoordinateSystem;
}

/**
 * The same trials in the task's own coordinates and in a second system.
 *
 * Method:  noise and covariation cost of variability-costs.ts, variance along against across of
 *          uncontrolled-manifold.ts (its root), Pearson correlation; each taken in both systems by
 *          compareCoordinates. Both systems are scaled: the first by the declared scales, the second by what
 *          independent deviations of one scale each become at the cloud's middle.
 * Source:  method sheet B8, B9, B11.
 */
export function compareCloud({ record, trials, axes, system }: Question): CloudComparison {
	const task = createTask(record);
	const cost = (x: readonly number[]) => Math.abs(task.evaluate(x));
	const own = createLinearSystem({ name: 'own', weights: trials[0]?.map(unit) ?? [] });
	const compare = (measure: CoordinateMeasure<'unmeasured'>): MeasurePair => {
		const found = compareCoordinates({ blocks: [trials], first: own, second: system, measure });
		if (found.ok) return { first: found.first.value, second: found.second.value };
		const [one, other] = [own, system].map((each) => measureIn(each, trials, measure));
		return { first: one ?? null, second: other ?? null };
	};
	const costs = new Map<string, ReturnType<typeof takeCosts>>();
	const costsIn = (written: Matrix, each: CoordinateSystem) => {
		const known = costs.get(each.name) ?? takeCosts(written, each, cost);
		costs.set(each.name, known);
		return known;
	};
	const mean = computeMeanCost(trials, cost);
	return {
		meanMiss: mean.ok ? mean.mean : null,
		hits: trials.filter((x) => isHit(task, task.evaluate(x))).length,
		trials: trials.length,
		noise: compare(([written = []], each) => take(costsIn(written, each)?.noise)),
		covariation: compare(([written = []], each) => take(costsIn(written, each)?.covariation)),
		alongAcross: compare(([written = []], each) => take(takeRatio(task, written, each))),
		correlation: compare(([written = []]) => take(correlate(written, axes))),
		secondTrials: convertExecutions(trials, system)
	};
}

function take(value: number | null | undefined) {
	return value === null || value === undefined || !Number.isFinite(value)
		? ({ ok: false, reason: 'unmeasured' } as const)
		: ({ ok: true, value } as const);
}

function measureIn(
	system: CoordinateSystem,
	trials: Matrix,
	measure: CoordinateMeasure<'unmeasured'>
): number | null {
	const written = convertExecutions(trials, system);
	if (!written) return null;
	const found = measure([written], system);
	return found.ok ? found.value : null;
}

function takeCosts(
	written: Matrix,
	system: CoordinateSystem,
	cost: (x: readonly number[]) => number
) {
	// The place is not asked about here, so two steps along each variable are enough.
	const ranges = (written[0] ?? []).map((_, axis) => {
		const values = column(written, axis);
		return { min: Math.min(...values), max: Math.max(...values) };
	});
	const costIn = (z: readonly number[]) => cost(system.toUnits(z));
	const found = computeVariabilityCosts(written, costIn, {
		...{ ranges, gridSteps: 2, isRefined: false }
	});
	return found.ok ? found : null;
}

/** Spread along over spread across, in scaled coordinates of the system. */
function takeRatio(task: Task, written: Matrix, system: CoordinateSystem): number | null {
	const middle = computeMeanVector(written);
	const slopes = system.derivative(middle);
	const scales = scaleCoordinates(
		slopes,
		task.variables.map(({ scale }) => scale)
	);
	if (!scales || task.resultCount >= task.variableCount) return null;
	const scaled = createScaledSystem({ origin: middle, scale: scales });
	const executions = convertExecutions(written, scaled);
	const jacobian = convertJacobian(task.jacobian(system.toUnits(middle)), system, middle);
	const weighted = multiplyMatrices(jacobian, scaled.derivative(middle));
	if (!executions || !weighted.every((row) => row.every(Number.isFinite))) return null;
	const found = computeManifoldVariance(executions, weighted);
	return found.ok ? Math.sqrt(found.ratio) : null;
}

/** SD of each coordinate when the variables deviate independently by one scale each; first order. */
function scaleCoordinates(slopes: Matrix, scales: readonly number[]): number[] | null {
	try {
		// Rows of the inverse derivative: how a coordinate moves with each variable.
		const forward = createLinearSystem({ name: 'inverse', weights: slopes }).derivative([]);
		const sizes = forward.map((row) =>
			Math.hypot(...row.map((slope, i) => slope * entry(scales, i)))
		);
		return sizes.every((size) => size > 0 && Number.isFinite(size)) ? sizes : null;
	} catch (error) {
		if (error instanceof RangeError) return null;
		throw error;
	}
}

function correlate(written: Matrix, [i, j]: readonly [number, number]): number | null {
	const covariance = computeCovariance(written.map((x) => [entry(x, i), entry(x, j)]));
	const [[a = 0, both = 0] = [], [, b = 0] = []] = covariance;
	return a > 0 && b > 0 ? both / Math.sqrt(a * b) : null;
}

function unit(_: number, i: number, all: readonly number[]): number[] {
	return all.map((_value, j) => (i === j ? 1 : 0));
}
