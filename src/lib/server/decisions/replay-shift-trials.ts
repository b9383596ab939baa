import { TargetShift } from '$scheduler/perturbations/target-shift';
import { shiftRuleSchema } from '$scheduler/perturbations/shift-rule';
import { blockParametersSchema, policyMemorySchema } from '$scheduler/policies/policy-memory';
import type { PolicyStateInput } from '$scheduler/policies/policy-state';
import { createTask } from '$scheduler/tasks/create-task';
import { isHit, type Task } from '$scheduler/tasks/task';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import type { BlockPlanned } from './effective-block';
import type { PersonOnRecord, StoredDecision } from './load-person';

type ShiftTrials = { trials: number[][]; before: StoredDecision | null; planned: BlockPlanned };

/**
 * A block under a moving target, from its executions: the rule is deterministic, so the level at
 * each trial, and with it the error against the moved target, follow from the results themselves. A
 * course that was given trial by trial is taken as it was given.
 *
 * @returns the block as the engine reads it, and where the target lay in each trial
 */
export function replayShiftTrials(
	person: PersonOnRecord,
	{ trials, before, planned }: ShiftTrials
): { last: NonNullable<PolicyStateInput['last']>; levels: number[] } {
	const task = createTask(taskRecordSchema.parse(person.content.task));
	const { levels, rule: declared } = blockParametersSchema.parse(planned.parameters);
	if (levels && !declared) {
		return { last: { kind: 'shift', trials, ...followCourse(task, trials, levels) }, levels };
	}
	const rule = shiftRuleSchema.parse(declared);
	const shift = new TargetShift(rule, findRunningState(before));
	const errors: number[] = [];
	const hits: boolean[] = [];
	const given: number[] = [];
	for (const [index, execution] of trials.entries()) {
		given.push(shift.level);
		const error = shift.level - task.evaluate(execution);
		const hit = isHit(task, error);
		errors.push(error);
		hits.push(hit);
		const isLastOfBlock = index === trials.length - 1;
		shift.observe({ error, hit, leftToday: null, isLastOfBlock });
	}
	return { last: { kind: 'shift', trials, errors, hits, rule }, levels: given };
}

/** Errors against a course of the target; beyond its end the last level stands. */
function followCourse(task: Task, trials: number[][], levels: readonly number[]) {
	const last = levels.at(-1) ?? 0;
	const errors = trials.map(
		(execution, index) => (levels[index] ?? last) - task.evaluate(execution)
	);
	return { errors, hits: errors.map((error) => isHit(task, error)) };
}

/** Where the running shift stood when the block began; null for its first block. */
function findRunningState(before: StoredDecision | null) {
	if (!before) return null;
	const output = JSON.parse(before.output) as { memory: unknown };
	const memory = policyMemorySchema.parse(output.memory);
	return memory.active?.kind === 'shift' ? memory.active.state : null;
}
