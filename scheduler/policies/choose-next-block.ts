import { createTask } from '../tasks/create-task.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { taskRecordSchema, type TaskRecordInput } from '../tasks/task-record.ts';
import type { Task } from '../tasks/task.ts';
import { absorbBlock } from './absorb-block.ts';
import { RUNGS, type Decision, type LadderStep, type Rung } from './decision.ts';
import { finishDecision } from './finish-decision.ts';
import { policyMemorySchema } from './policy-memory.ts';
import {
	policySettingsSchema,
	type PolicySettings,
	type PolicySettingsInput
} from './policy-settings.ts';
import { policyStateSchema, type PolicyState, type PolicyStateInput } from './policy-state.ts';
import { askChallenge, askLean } from './rungs/challenge.ts';
import { askData, askTarget } from './rungs/data.ts';
import { askCoolDown, askGoals, askSettle, askUnchanged } from './rungs/goals.ts';
import { askLimits } from './rungs/limits.ts';
import { askObligations, askRecovery } from './rungs/obligations.ts';
import { askPerson } from './rungs/person.ts';
import { askRunning } from './rungs/running.ts';
import type { Answer, Turn } from './turn.ts';

const ASK: Record<Rung, (turn: Turn) => Answer | null> = {
	limits: askLimits,
	person: askPerson,
	recovery: askRecovery,
	obligations: askObligations,
	data: askData,
	target: askTarget,
	running: askRunning,
	goals: askGoals,
	settle: askSettle,
	'cool-down': askCoolDown,
	unchanged: askUnchanged,
	challenge: askChallenge,
	lean: askLean,
	practice: askPractice
};

/**
 * Chooses the kind and the numbers of a person's next block, and says why.
 *
 * The finished block is absorbed into memory; then the rungs are asked in order and the first that
 * answers decides. Plain data in and out; the same live, simulated and replayed.
 * Decision: everything in `state`, `protocol` and `task`; no random numbers, no clock.
 * Source:  method sheet D0 to D4; tests/reference/selector.test.ts, puck-blocks.test.ts.
 * @throws {ZodError} an input that does not fit its schema, with its path
 * @throws {RangeError} a block that was run without ever being planned, or a trial of another task
 */
export function chooseNextBlock(options: {
	state: PolicyStateInput;
	protocol: PolicySettingsInput;
	task: TaskRecordInput;
}): Decision {
	return chooseForTask({
		state: policyStateSchema.parse(options.state),
		settings: policySettingsSchema.parse(options.protocol),
		task: createTask(taskRecordSchema.parse(options.task))
	});
}

/**
 * The same for inputs that are parsed already, and for any task model.
 * `state` is not kept and not changed.
 */
export function chooseForTask(options: {
	state: PolicyState;
	settings: PolicySettings;
	task: Task;
}): Decision {
	const turn = openTurn(options);
	absorbBlock(turn);
	const ladder: LadderStep[] = [];
	for (const rung of RUNGS) {
		const answer = ASK[rung](turn);
		ladder.push({ rung, code: answer?.code ?? null });
		if (answer) return finishDecision({ turn, rung, answer, ladder });
	}
	throw new RangeError('no rung answered');
}

/** Copies the memory; a release by a person clears what was held. */
export function openTurn(options: {
	state: PolicyState;
	settings: PolicySettings;
	task: Task;
}): Turn {
	const memory = policyMemorySchema.parse(options.state.memory);
	if (options.state.release) {
		memory.held = null;
		memory.recent = [];
		memory.noChallenge = 0;
		memory.stuckSeen = true;
		// Somebody has looked at the stray trials too; the cloud of that block stays unused.
		memory.lastGates = memory.lastGates.filter((gate) => gate !== 'OUTLIERS');
	}
	const { state, settings, task } = options;
	return { state, settings, task: createScaledTask(task), memory, facts: {} };
}

/** The last rung: plain practice, with what refused each aim. */
function askPractice({ facts }: Turn): Answer {
	return { code: 'NO-CHALLENGE', kind: 'practice', values: { refused: facts.aims?.refused ?? {} } };
}
