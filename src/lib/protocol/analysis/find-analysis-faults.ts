import { INTERCURRENT_EVENTS } from '$scheduler/protocol/analysis-plan';
import { checkNumber, checkText, faultAt, type Fault } from '../fault';
import { emptyAnalysis } from '../empty-parts';
import { hasAdaptiveTime } from '../has-adaptive-time';
import type { ProtocolDraft } from '../protocol-draft';
import { eventWords, type IntercurrentEvent } from './event-words';

/** What is missing in outcomes, estimand and analysis once any of it is written. */
export function findAnalysisFaults(draft: ProtocolDraft): Fault[] {
	const { analysis } = draft;
	if (JSON.stringify(analysis) === JSON.stringify(emptyAnalysis())) return [];
	return [
		...findOutcomeFaults(draft),
		...findTextFaults(draft),
		...findStrategyFaults(draft),
		...findLookFaults(draft)
	];
}

function findOutcomeFaults({ analysis, visits }: ProtocolDraft): Fault[] {
	const { outcomes } = analysis;
	const where = { place: 'Outcomes', field: 'analysis.outcomes' };
	const primary = outcomes.filter(({ rank }) => rank === 'primary');
	return [
		...(primary.length === 1
			? []
			: [
					faultAt(
						...(['primary-outcome', where] as const),
						`${primary.length === 0 ? 'No outcome' : `${primary.length} outcomes`} called primary.`,
						'Name one primary outcome; others are secondary or exploratory.'
					)
				]),
		...outcomes.flatMap(({ name, visitNumber }, index) => {
			const at = (field: string) => ({
				...{ place: `Outcome ${index + 1}`, field: `analysis.outcomes.${index}.${field}` }
			});
			const remedy = 'Name what is measured.';
			return [
				...checkText({ ...at('name'), value: name, name: 'The name', remedy }),
				...checkNumber({
					...{ ...at('visitNumber'), value: visitNumber, name: 'The visit' },
					...{ min: 1, max: visits.length, isWhole: true }
				})
			];
		})
	];
}

function findTextFaults({ analysis, arms }: ProtocolDraft): Fault[] {
	const { estimand } = analysis;
	const text = (field: keyof typeof labels) =>
		checkText({
			...{ value: estimand[field], place: 'Estimand', field: `analysis.estimand.${field}` },
			...{ name: labels[field], remedy: remedies[field] }
		});
	const isCompared = arms.length > 1;
	return [
		...(isCompared ? (['population', 'treatment', 'variable', 'summary'] as const) : []).flatMap(
			text
		),
		...checkText({
			...{ value: analysis.analysis, place: 'Analysis', field: 'analysis.analysis' },
			...{ name: 'The analysis', remedy: 'Say how the primary outcome is analysed.' }
		})
	];
}

const labels = {
	population: 'The population',
	treatment: 'The treatment',
	variable: 'The variable',
	summary: 'The summary'
} as const;
const remedies = {
	population: 'Say whom the answer is about.',
	treatment: 'Say which conditions are compared.',
	variable: 'Say what is taken of each person, and when.',
	summary: 'Say how the arms are summed up, such as a difference of means.'
} as const;

/** Events that can happen in this design; each needs a strategy, so that nobody chooses it afterwards. */
export function listPossibleEvents(draft: ProtocolDraft): IntercurrentEvent[] {
	const isDecided = hasAdaptiveTime(draft) && draft.arms.some(({ rule }) => rule === 'adaptive');
	const practises = draft.visits.some(({ kind }) => kind === 'practice');
	const decided = new Set<IntercurrentEvent>(['fallback-block', 'rule-overridden']);
	const ofPractice = new Set<IntercurrentEvent>([
		'missed-practice-day',
		'withdrawal-from-practice'
	]);
	return INTERCURRENT_EVENTS.filter(
		(event) => (isDecided || !decided.has(event)) && (practises || !ofPractice.has(event))
	);
}

function findStrategyFaults(draft: ProtocolDraft): Fault[] {
	if (draft.arms.length < 2) return [];
	const said = new Set(draft.analysis.estimand.events.map(({ event }) => event));
	return listPossibleEvents(draft)
		.filter((event) => !said.has(event))
		.map((event) =>
			faultAt(
				...([
					'strategy-missing',
					{ place: 'Estimand', field: `analysis.events.${event}` }
				] as const),
				`${eventWords[event].label}: no strategy is chosen.`,
				'Choose how it is dealt with.'
			)
		);
}

function findLookFaults({ analysis }: ProtocolDraft): Fault[] {
	const { interimLooks } = analysis;
	const where = { place: 'Interim looks', field: 'analysis.interimLooks' };
	const isOutside = interimLooks.some((look) => look === null || !(look > 0 && look < 1));
	if (isOutside) {
		const text = `Looks after ${interimLooks.join(', ')} of the people.`;
		return [faultAt('look-outside', where, text, 'Write shares between 0 and 1.')];
	}
	const falls = interimLooks.some(
		(look, index) => index > 0 && (look ?? 0) <= (interimLooks[index - 1] ?? 0)
	);
	return falls
		? [faultAt('look-order', where, 'The shares of the looks do not rise.', 'Let them rise.')]
		: [];
}
