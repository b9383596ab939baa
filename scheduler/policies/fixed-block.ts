import { createTask } from '../tasks/create-task.ts';
import { absorbBlock } from './absorb-block.ts';
import { openTurn } from './choose-next-block.ts';
import type { Decision } from './decision.ts';
import type { ArmRule, DecisionInputs } from './decision-record.ts';
import { finishDecision } from './finish-decision.ts';
import { askLimits } from './rungs/limits.ts';

type FixedRule = Extract<ArmRule, { kind: 'fixed' }>;

/**
 * The rule of a fixed arm: the limits of the day, then the block that the protocol lists.
 *
 * The answer has the shape of an adaptive decision, so that every arm is decided, stored and replayed by
 * the same code. What the last block showed is kept in memory, for the adaptive blocks of a protocol
 * that lists some blocks and leaves others to the policy; it changes nothing here.
 * Decision: the listed block, the readiness and the limits.
 */
export function chooseFixedBlock(inputs: DecisionInputs, rule: FixedRule): Decision {
	const turn = openTurn({
		state: inputs.state,
		settings: inputs.protocol,
		task: createTask(inputs.task)
	});
	absorbBlock(turn);
	const limited = askLimits(turn);
	if (limited)
		return finishDecision({
			...{ turn, rung: 'limits', answer: limited },
			ladder: [{ rung: 'limits', code: limited.code }]
		});
	const { kind, parameters } = rule.block;
	const answer = { code: 'PROTOCOL-BLOCK', kind, parameters };
	return finishDecision({
		...{ turn, rung: 'plan', answer },
		ladder: [
			{ rung: 'limits', code: null },
			{ rung: 'plan', code: 'PROTOCOL-BLOCK' }
		]
	});
}
