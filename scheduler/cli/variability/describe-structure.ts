import { z } from 'zod';
import type { Matrix } from '../../linear-algebra/vector.ts';
import { createTask } from '../../tasks/create-task.ts';
import type { Task } from '../../tasks/task.ts';
import { bootstrapInterval, type BlockMeasure } from '../../variability/block-bootstrap.ts';
import { computeCloudAlignment } from '../../variability/cloud-alignment.ts';
import {
	compareCoordinates,
	type CoordinateMeasure
} from '../../variability/compare-coordinates.ts';
import { convertExecutions, type CoordinateSystem } from '../../variability/coordinates.ts';
import {
	computeFluctuationExponent,
	computeLagOne,
	type SeriesMeasure
} from '../../variability/fluctuation-analysis.ts';
import { computeGoalSensitivity, splitGoalSeries } from '../../variability/goal-sensitivity.ts';
import { computeCovariance, computeMeanVector } from '../../variability/moments.ts';
import { computeManifoldVariance } from '../../variability/uncontrolled-manifold.ts';
import { measureNames, requireWidths, trialsSchema, type IntervalRequest } from './block-inputs.ts';
import { createFirstSystem, createSecondSystem, type SecondSystem } from './second-system.ts';
import { findJacobian, findNearestSolution, findTangents } from './task-geometry.ts';

/** Trials of a task with more variables than results. */
export const structureInputSchema = z
	.strictObject({ ...measureNames, trials: trialsSchema })
	.superRefine((input, context) => {
		requireWidths(input, { trials: input.trials }, context);
		if (input.task.variables.length > 1) return;
		const message = 'a task of one variable has no solutions to move along';
		context.addIssue({ code: 'custom', path: ['task', 'variables'], message });
	});

type StructureInput = z.output<typeof structureInputSchema>;
type Measured<T> = ({ ok: true } & T) | { ok: false; reason: string };
/** A measure of trials written in one coordinate system. */
type Measure<T> = (executions: Matrix, system: CoordinateSystem) => Measured<T>;

/** Variance along and across the solutions. */
export function describeManifold(input: StructureInput) {
	const task = createTask(input.task);
	return describeInBoth(task, input, manifoldIn(task), ({ logRatio }) => logRatio, 'logRatio');
}

/** How the cloud lies to the solutions. */
export function describeAlignment(input: StructureInput) {
	const task = createTask(input.task);
	return describeInBoth(task, input, alignmentIn(task), ({ angleDeg }) => angleDeg, 'angleDeg');
}

/** How spread of the executions becomes spread of the result, and how deviations are corrected. */
export function describeGoal(input: StructureInput) {
	const task = createTask(input.task);
	const factor = 'alignmentFactor';
	const found = describeInBoth(task, input, goalIn(task), (goal) => goal[factor], factor);
	return found.ok ? { ...found, series: describeSeries(task, input.trials) } : found;
}

function manifoldIn(task: Task): Measure<ManifoldAnswer> {
	return (executions, system) => {
		const at = findJacobian(task, system, computeMeanVector(executions));
		return at.ok ? computeManifoldVariance(executions, at.J) : at;
	};
}

type ManifoldAnswer = Extract<ReturnType<typeof computeManifoldVariance>, { ok: true }>;
type AlignmentAnswer = Extract<ReturnType<typeof computeCloudAlignment>, { ok: true }>;
type GoalAnswer = Extract<ReturnType<typeof computeGoalSensitivity>, { ok: true }>;

function alignmentIn(task: Task): Measure<AlignmentAnswer> {
	return (executions, system) => {
		const nearest = findNearestSolution(
			task,
			executions.map((z) => system.toUnits(z))
		);
		if (!nearest.ok) return nearest;
		const point = system.toCoordinates(nearest.point);
		if (!point) return { ok: false, reason: 'not-writable' };
		const at = findJacobian(task, system, point);
		return at.ok ? computeCloudAlignment(computeCovariance(executions), findTangents(at.J)) : at;
	};
}

function goalIn(task: Task): Measure<GoalAnswer> {
	return (executions, system) => {
		const at = findJacobian(task, system, computeMeanVector(executions));
		return at.ok ? computeGoalSensitivity(computeCovariance(executions), at.J) : at;
	};
}

/** The measure in the task's scale, its interval, and the same number in a second system. */
function describeInBoth<T extends object, Name extends string>(
	task: Task,
	input: { trials: Matrix; interval: IntervalRequest; second?: SecondSystem | undefined },
	measure: Measure<T>,
	read: (answer: T) => number,
	name: Name
) {
	const blocks = [input.trials];
	const first = createFirstSystem(task);
	const written = convertExecutions(input.trials, first) ?? [];
	const found = measure(written, first);
	if (!found.ok) return found;
	const one: CoordinateMeasure<string> = ([executions = []], system) => {
		const there = measure(executions, system);
		return there.ok ? { ok: true, value: read(there) } : there;
	};
	const second = createSecondSystem(task, blocks, input.second);
	return {
		...found,
		compared: name,
		interval: drawInterval([written], (drawn) => one(drawn, first), input.interval),
		secondSystem: compareCoordinates({ blocks, first, second, measure: one })
	};
}

function drawInterval(blocks: readonly Matrix[], measure: BlockMeasure, request: IntervalRequest) {
	const { replicates: replicateCount, ...rest } = request;
	if (replicateCount === 0 || blocks.some((trials) => trials.length < rest.blockLength))
		return null;
	return bootstrapInterval({ blocks, measure, replicateCount, ...rest });
}

/** Lag-1 correlation and fluctuation exponent of the deviations along and across, in the task's scale. */
function describeSeries(task: Task, trials: Matrix) {
	const system = createFirstSystem(task);
	const executions = convertExecutions(trials, system) ?? [];
	const mean = computeMeanVector(executions);
	const at = findJacobian(task, system, mean);
	if (!at.ok) return null;
	const { along, across } = splitGoalSeries(executions, mean, at.J);
	const describe = (series: readonly number[]) => ({
		lagOne: valueOrNull(computeLagOne(series)),
		fluctuationExponent: valueOrNull(computeFluctuationExponent(series))
	});
	return { along: along.map(describe), across: across.map(describe) };
}

function valueOrNull(measure: SeriesMeasure): number | null {
	return measure.ok ? measure.value : null;
}
