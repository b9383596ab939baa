import { createTask } from '$scheduler/tasks/create-task';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import type { BlockParameters } from '$scheduler/policies/policy-memory';
import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import { findResultRange } from '$lib/protocol/visit-results';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { RigLimits } from '$lib/server/db/schema';
import { readPlan, type BlockPlanToRun, type PlanFault } from './check-plan';

export type LimitFault = PlanFault | { code: 'trials' | 'variable' | 'target'; message: string };

type Limits = { protocol: ProtocolContent; rig: RigLimits; visitNumber: number };

/**
 * What of a block exceeds the frozen limits of the protocol or of the rig, or cannot be run at all; empty
 * when nothing does. A block with a fault is never issued.
 */
export function findLimitFaults(plan: BlockPlanToRun, limits: Limits): LimitFault[] {
	const read = readPlan(plan);
	if (!read.ok) return [read.fault];
	const { parameters } = read;
	const task = taskRecordSchema.parse(limits.protocol.task);
	return [
		...findTrialFaults(parameters, limits),
		...findVariableFaults(parameters, task, limits.rig),
		...findTargetFaults(parameters, task, limits.rig)
	];
}

function findTrialFaults(parameters: BlockParameters, limits: Limits): LimitFault[] {
	const { protocol, rig, visitNumber } = limits;
	const trials = parameters.trials ?? 0;
	const others = protocol.visits.find((visit) => visit.number === visitNumber)?.blocks ?? [];
	const planned = others.reduce((sum, block) => sum + block.trials, 0);
	const mostTrials = Math.min(protocol.limits.trialsPerVisit, rig.trialsPerVisit);
	if (trials >= 1 && Math.max(trials, planned) <= mostTrials) return [];
	return [{ code: 'trials', message: `${trials} trials; the visit's limit is ${mostTrials}.` }];
}

/** The region's centre, and the way out where it is known, must be movements that the rig allows. */
function findVariableFaults(
	{ region }: BlockParameters,
	task: TaskRecord,
	rig: RigLimits
): LimitFault[] {
	if (!region) return [];
	const center = region.centerInUnits ?? createScaledTask(createTask(task)).toUnits(region.center);
	return [center, ...(region.exitInUnits ? [region.exitInUnits] : [])].flatMap((place) =>
		task.variables.flatMap(({ name, unit }, index): LimitFault[] => {
			const value = place[index] ?? Number.NaN;
			const most = rig.variableMax[name];
			if (most === undefined || Math.abs(value) <= most) return [];
			const message = `${name} ${value} ${unit}; the rig's limit is ${most}.`;
			return [{ code: 'variable', message }];
		})
	);
}

/** A moved target must be reached by some movement inside the task's ranges and the rig's limits. */
function findTargetFaults(
	parameters: BlockParameters,
	task: TaskRecord,
	rig: RigLimits
): LimitFault[] {
	const { level, levels = [], targetOffset, rule } = parameters;
	const wanted = [level, targetOffset, rule?.goal, ...levels].filter((at) => at !== undefined);
	if (wanted.length === 0) return [];
	const allowed = task.variables.map((variable) => {
		const most = rig.variableMax[variable.name] ?? Number.POSITIVE_INFINITY;
		return { ...variable, min: Math.max(variable.min, -most), max: Math.min(variable.max, most) };
	});
	const range = findResultRange({ ...task, variables: allowed });
	if (!range) return [];
	return [Math.min(...wanted), Math.max(...wanted)]
		.filter((at) => at < range.low || at > range.high)
		.slice(0, 1)
		.map((at): LimitFault => {
			const message = `a target at ${at} ${task.resultUnit}; allowed movements reach ${range.low} to ${range.high}.`;
			return { code: 'target', message };
		});
}
