import type { DecisionRecord } from './decision-record.ts';
import type { Decision, LadderStep, Reason } from './decision.ts';
import type { AimName } from './policy-memory.ts';
import { readValues, type WordContext } from './words/read-values.ts';
import { REASON_WORDS } from './words/reason-words.ts';
import { AIM_REFUSAL_WORDS, describeShare } from './words/refusal-words.ts';
import { RUNG_WORDS } from './words/rung-words.ts';

export interface ExplainedCode {
	readonly code: string;
	readonly text: string;
}

export interface ExplainedRung {
	readonly rung: LadderStep['rung'];
	readonly asks: string;
	/** Null: it had nothing to say and the next rung was asked. */
	readonly code: string | null;
	readonly text: string;
}

export interface ExplainedDecision {
	/** The deciding reason first. */
	readonly reasons: readonly ExplainedCode[];
	readonly ladder: readonly ExplainedRung[];
	/** One sentence for each share weighed, accepted or not. */
	readonly shares: readonly { accepted: boolean; text: string }[];
	/** Why an aim was not taken up. */
	readonly refused: readonly (ExplainedCode & { aim: AimName })[];
}

/**
 * A reason's code as a sentence with its numbers and units.
 * @example explainReason({ rung: 'limits', code: 'DAY-DONE', values: {} }, context).text
 * // 'All blocks of this day have been run.'
 */
export function explainReason(reason: Reason, context: WordContext): ExplainedCode {
	const sentence = REASON_WORDS[reason.code];
	const text = sentence
		? sentence(readValues(reason.values, context), context)
		: `The engine answered ${reason.code}.`;
	return { code: reason.code, text };
}

/** A whole decision in sentences: why, what else was asked, what was weighed, what was refused. */
export function explainDecision(
	decision: Pick<Decision, 'reasons' | 'ladder' | 'facts'>,
	context: WordContext
): ExplainedDecision {
	const { reasons, ladder, facts } = decision;
	const place = context.settings.place;
	const weighed = [...(facts.place ?? []), ...(facts.lean ?? [])];
	return {
		reasons: reasons.map((reason) => explainReason(reason, context)),
		ladder: ladder.map((step) => explainRung(step, reasons, context)),
		shares: weighed.map((rung) => ({
			accepted: rung.accepted,
			text: describeShare(rung, place)
		})),
		refused: explainRefusals(facts.aims?.refused ?? {})
	};
}

/** The same for a stored record, which brings its task and settings along. */
export function explainRecord(record: DecisionRecord): ExplainedDecision {
	const { task, protocol } = record.inputs;
	return explainDecision(record, { resultUnit: task.resultUnit, settings: protocol });
}

function explainRung(
	{ rung, code }: LadderStep,
	reasons: readonly Reason[],
	context: WordContext
): ExplainedRung {
	const words = RUNG_WORDS[rung];
	const reason = reasons.find((candidate) => candidate.rung === rung && candidate.code === code);
	const text = reason ? explainReason(reason, context).text : words.passed;
	return { rung, asks: words.asks, code, text };
}

function explainRefusals(refused: Partial<Record<AimName, string>>): ExplainedDecision['refused'] {
	const aims: AimName[] = ['region', 'shift'];
	return aims.flatMap((aim) => {
		const code = refused[aim];
		if (code === undefined) return [];
		return [{ aim, code, text: AIM_REFUSAL_WORDS[code] ?? `The engine answered ${code}.` }];
	});
}
