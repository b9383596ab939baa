import { checkBaseline } from './checks/no-baseline.ts';
import { checkBurden } from './checks/burden.ts';
import { checkDecisionTrials } from './checks/few-trials.ts';
import { checkGaps } from './checks/impossible-gap.ts';
import { checkInstructions } from './checks/instruction-differs.ts';
import { checkNoise } from './checks/noise-rule.ts';
import { checkOrder } from './checks/order-fixed.ts';
import { checkRest } from './checks/unequal-rest.ts';
import { checkRetentionClean } from './checks/retention-disturbed.ts';
import { checkRetentionTime } from './checks/retention-early.ts';
import { checkTrials } from './checks/unequal-trials.ts';
import { checkWashout } from './checks/no-washout.ts';
import type { Design } from './design.ts';
import type { Check, CheckContext, Finding, FindingCode } from './finding.ts';

const CHECKS: Readonly<Record<FindingCode, Check>> = {
	'no-baseline': checkBaseline,
	'impossible-gap': checkGaps,
	burden: checkBurden,
	'unequal-trials': checkTrials,
	'unequal-rest': checkRest,
	'instruction-differs': checkInstructions,
	'order-fixed': checkOrder,
	'few-trials': checkDecisionTrials,
	'noise-rule': checkNoise,
	'no-washout': checkWashout,
	'retention-early': checkRetentionTime,
	'retention-disturbed': checkRetentionClean
};

/**
 * Everything about a design that must be mended, or justified in writing, before it is frozen.
 *
 * Shapes:  a design as far as it is written; what is missing is not judged, its own form asks for it.
 * Decision: the design, and what the lab's rigs allow.
 * Source:  limits and their grounds in design-limits.ts. Accuracy: check-design.test.ts, each limit from
 *          both sides.
 * @example checkDesign(designSchema.parse(content)).map(({ text }) => text)
 */
export function checkDesign(design: Design, context: CheckContext = { rigs: [] }): Finding[] {
	return Object.values(CHECKS).flatMap((check) => check(design, context));
}
