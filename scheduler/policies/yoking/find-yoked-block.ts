import type { BlockParameters, BlockPlan } from '../policy-memory.ts';
import { compareCodes } from './match-people.ts';
import type { MasterBlock, YokedRule } from './yoked-rule.ts';

/** What a yoked partner gets next. */
export type YokedAnswer =
	| {
			readonly action: 'issue';
			readonly code:
				'YOKED' | 'RE-PAIRED' | 'ORPHAN-KEEP' | 'ORPHAN-PRACTICE' | 'LATE-KEEP' | 'LATE-PRACTICE';
			readonly kind: MasterBlock['kind'];
			readonly parameters: BlockParameters;
			/** Whose block it is; null: nobody's. */
			readonly master: string | null;
			/** Hours since the block was scored; null where none was taken over. */
			readonly leadHours: number | null;
	  }
	| { readonly action: 'wait'; readonly code: 'LATE-WAIT'; readonly untilHours: number };

/**
 * The block of a yoked partner: the master's own block of the same number, once that is scored.
 *
 * Units:   hours on the study's clock.
 * Method:  master's block scored → that block. Master withdrawn → the orphan rule: the nearest free
 *          finished master that has such a block (ties by code), the last level, or plain practice. Else
 *          late → wait up to the longest gap, the last level, or plain practice.
 * Decision: what is scored and when, the declared rules, and the partner's last level.
 * Source:  method sheet D5. Accuracy: tests/reference/yoking.test.ts (the sheet's prototype).
 */
export function findYokedBlock(rule: YokedRule, lastLevel: BlockPlan | null): YokedAnswer {
	const { block, nowHours, master } = rule;
	const own = master.blocks[block];
	if (own && own.scoredAtHours !== null && own.scoredAtHours <= nowHours)
		return issue('YOKED', own, { master: master.code, leadHours: nowHours - own.scoredAtHours });
	return master.withdrawn ? findOrphanBlock(rule, lastLevel) : findLateBlock(rule, lastLevel);
}

function findOrphanBlock(rule: YokedRule, lastLevel: BlockPlan | null): YokedAnswer {
	const { orphan } = rule.settings;
	const next = orphan === 're-pair' ? findNearestFree(rule) : null;
	if (next) return issue('RE-PAIRED', next.block, { master: next.code, leadHours: null });
	return keepOrPractise(orphan, lastLevel, ['ORPHAN-KEEP', 'ORPHAN-PRACTICE']);
}

/** Finished masters were scored long ago; one of them may still be shorter than this chain. */
function findNearestFree({ pool, block: place }: YokedRule) {
	const [nearest] = pool
		.flatMap(({ code, distance, blocks }) => {
			const block = blocks[place];
			return block ? [{ code, distance, block }] : [];
		})
		.sort((a, b) => a.distance - b.distance || compareCodes(a.code, b.code));
	return nearest ?? null;
}

function findLateBlock(rule: YokedRule, lastLevel: BlockPlan | null): YokedAnswer {
	const { settings, nowHours, previousEndHours, gapMaxHours } = rule;
	const untilHours = previousEndHours + gapMaxHours;
	if (settings.late === 'wait' && nowHours - previousEndHours < gapMaxHours)
		return { action: 'wait', code: 'LATE-WAIT', untilHours };
	return keepOrPractise(settings.late, lastLevel, ['LATE-KEEP', 'LATE-PRACTICE']);
}

function keepOrPractise(
	rule: string,
	lastLevel: BlockPlan | null,
	[keep, practise]: ['ORPHAN-KEEP', 'ORPHAN-PRACTICE'] | ['LATE-KEEP', 'LATE-PRACTICE']
): YokedAnswer {
	const nobody = { master: null, leadHours: null };
	if (rule === 'keep-last-level' && lastLevel) {
		const { kind, parameters } = lastLevel;
		if (kind === 'region' || kind === 'shift') return issue(keep, { kind, parameters }, nobody);
	}
	return issue(practise, { kind: 'practice', parameters: {} }, nobody);
}

function issue(
	code: Extract<YokedAnswer, { action: 'issue' }>['code'],
	{ kind, parameters }: Pick<MasterBlock, 'kind' | 'parameters'>,
	from: { master: string | null; leadHours: number | null }
): YokedAnswer {
	return { action: 'issue', code, kind, parameters, ...from };
}

/**
 * The level that a block leaves a partner at: its region, or the last level of its shift, held constant;
 * null after a block without a perturbation.
 */
export function findLevelLeft({ kind, parameters }: BlockPlan): BlockPlan | null {
	if (kind === 'region') return { kind, parameters };
	if (kind !== 'shift') return null;
	const { levels, state: _state, rule: _rule, ...rest } = parameters;
	return { kind, parameters: { ...rest, level: levels?.at(-1) ?? parameters.level ?? 0 } };
}
