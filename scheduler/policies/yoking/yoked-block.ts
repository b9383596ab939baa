import { createTask } from '../../tasks/create-task.ts';
import { openTurn } from '../choose-next-block.ts';
import type { DecisionInputs } from '../decision-record.ts';
import type { Decision } from '../decision.ts';
import { finishDecision } from '../finish-decision.ts';
import type { BlockParameters } from '../policy-memory.ts';
import { askLimits } from '../rungs/limits.ts';
import type { Answer } from '../turn.ts';
import { findLevelLeft, findYokedBlock } from './find-yoked-block.ts';
import type { YokedRule } from './yoked-rule.ts';

/**
 * The rule of a yoked arm: the limits of the day, then the master's block of the same number.
 *
 * The answer has the shape of an adaptive decision, so that every arm is decided, stored and replayed by
 * the same code. The partner's own trials change nothing but whether a rest has just been given.
 * Decision: what the master's chain shows, the declared rules, own readiness and limits.
 * Source:  method sheet D5.
 */
export function chooseYokedBlock(inputs: DecisionInputs, rule: YokedRule): Decision {
	const { state, protocol: settings, task } = inputs;
	const turn = openTurn({ state, settings, task: createTask(task) });
	const { memory } = turn;
	if (state.last) memory.rested = state.last.kind === 'rest';
	const limited = askLimits(turn);
	if (limited) {
		const ladder = [{ rung: 'limits' as const, code: limited.code }];
		return finishDecision({ turn, rung: 'limits', answer: limited, ladder });
	}
	const answer = describe(rule, findYokedBlock(rule, memory.yokedLevel ?? null));
	const decision = finishDecision({
		...{ turn, rung: 'yoked', answer },
		ladder: [
			{ rung: 'limits', code: null },
			{ rung: 'yoked', code: answer.code }
		]
	});
	// What the policy keeps for its own offers means nothing here.
	memory.offer = null;
	if (decision.kind !== 'wait') memory.yokedLevel = findLevelLeft(decision);
	return decision;
}

function describe(rule: YokedRule, found: ReturnType<typeof findYokedBlock>): Answer {
	const { code } = found;
	const { block, master, settings } = rule;
	if (found.action === 'wait') {
		const values = { block: block + 1, master: master.code, untilHours: found.untilHours };
		return { code, kind: 'wait', values };
	}
	const { leadHours, kind } = found;
	const parameters = kind === 'shift' ? takeCourse(found.parameters) : found.parameters;
	const lead = leadHours === null ? {} : { leadHours, isLeadKept: leadHours >= settings.leadHours };
	return {
		...{ code, kind, parameters },
		values: { block: block + 1, master: found.master, ...lead }
	};
}

/** The course of a shift without the rule that made it: nothing here depends on the partner's errors. */
function takeCourse(parameters: BlockParameters): BlockParameters {
	const { rule: _rule, state: _state, hold: _hold, retained: _retained, ...course } = parameters;
	return { ...course, level: course.levels?.[0] ?? course.level ?? 0 };
}
