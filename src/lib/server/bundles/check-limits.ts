import { createTask } from '$scheduler/tasks/create-task';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import type { BlockParameters } from '$scheduler/policies/policy-memory';
import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import { findResultRange } from '$lib/protocol/visit-results';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { RigLimits } from '$lib/server/db/schema';
import { readPlan, type BlockPlanToRun, type PlanFault } from './check-plan';

export type LimitFault =
	PlanFault | { code: 'trials' | 'variable' | 'target' | 'shift' | 'penalty'; message: string };

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
	const variableMax = joinVariableMax(limits.protocol, limits.rig);
	return [
		...findTrialFaults(parameters, limits),
		...findVariableFaults(parameters, task, variableMax),
		...findTargetFaults(parameters, task, variableMax),
		...findDoseFaults(parameters, task.resultUnit, limits)
	];
}

function findTrialFaults(parameters: BlockParameters, limits: Limits): LimitFault[] {
	const { protocol, rig, visitNumber } = limits;
	const trials = parameters.trials ?? 0;
	const visit = protocol.visits.find(({ number }) => number === visitNumber);
	const lists = visit ? [visit.blocks, ...Object.values(visit.armBlocks ?? {})] : [];
	const planned = Math.max(0, ...lists.map((list) => list.reduce((sum, b) => sum + b.trials, 0)));
	const mostTrials = Math.min(protocol.limits.trialsPerVisit, rig.trialsPerVisit);
	if (trials >= 1 && Math.max(trials, planned) <= mostTrials) return [];
	return [{ code: 'trials', message: `${trials} trials; the visit's limit is ${mostTrials}.` }];
}

type VariableMax = Readonly<Record<string, number>>;

/** The narrower of what the protocol and the rig allow, variable by variable. */
export function joinVariableMax(protocol: ProtocolContent, rig: RigLimits): VariableMax {
	const own = protocol.limits.variableMax ?? {};
	const names = new Set([...Object.keys(own), ...Object.keys(rig.variableMax)]);
	const least = (name: string) =>
		Math.min(
			own[name] ?? Number.POSITIVE_INFINITY,
			rig.variableMax[name] ?? Number.POSITIVE_INFINITY
		);
	return Object.fromEntries([...names].map((name) => [name, least(name)]));
}

/** How far a target moves, and how many of a person's own trials a region catches. */
function findDoseFaults(
	{ level, levels = [], rule, region }: BlockParameters,
	unit: string,
	{ protocol, rig }: Limits
): LimitFault[] {
	const shiftMax = leastOf(protocol.limits.shiftMax, rig.shiftMax);
	const penaltyMax = leastOf(protocol.limits.penaltyShareMax, rig.penaltyShareMax);
	const moves = [level ?? 0, rule?.goal ?? 0, ...levels].map(Math.abs);
	const farthest = moves.reduce((most, move) => Math.max(most, move), 0);
	const caught = Math.max(region?.share ?? 0, region?.catch ?? 0);
	return [
		...exceed(
			'shift',
			farthest,
			shiftMax,
			(most) => `a target moved by ${farthest} ${unit}; the limit is ${most}.`
		),
		...exceed(
			'penalty',
			caught,
			penaltyMax,
			(most) => `a region that catches ${caught} of own trials; the limit is ${most}.`
		)
	];
}

const leastOf = (...limits: readonly (number | undefined)[]): number =>
	Math.min(...limits.map((limit) => limit ?? Number.POSITIVE_INFINITY));

function exceed(
	code: 'shift' | 'penalty',
	value: number,
	most: number,
	say: (most: number) => string
): LimitFault[] {
	return value <= most ? [] : [{ code, message: say(most) }];
}

/** The region's centre, and the way out where it is known, must be movements that the rig allows. */
function findVariableFaults(
	{ region }: BlockParameters,
	task: TaskRecord,
	variableMax: VariableMax
): LimitFault[] {
	if (!region) return [];
	const center = region.centerInUnits ?? createScaledTask(createTask(task)).toUnits(region.center);
	return [center, ...(region.exitInUnits ? [region.exitInUnits] : [])].flatMap((place) =>
		task.variables.flatMap(({ name, unit }, index): LimitFault[] => {
			const value = place[index] ?? Number.NaN;
			const most = variableMax[name];
			if (most === undefined || Math.abs(value) <= most) return [];
			const message = `${name} ${value} ${unit}; the limit is ${most}.`;
			return [{ code: 'variable', message }];
		})
	);
}

/** A moved target must be reached by some movement inside the task's ranges and the rig's limits. */
function findTargetFaults(
	parameters: BlockParameters,
	task: TaskRecord,
	variableMax: VariableMax
): LimitFault[] {
	const { level, levels = [], targetOffset, rule } = parameters;
	const wanted = [level, targetOffset, rule?.goal, ...levels].filter((at) => at !== undefined);
	if (wanted.length === 0) return [];
	const allowed = task.variables.map((variable) => {
		const most = variableMax[variable.name] ?? Number.POSITIVE_INFINITY;
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
