import { createPatternDraft } from '$lib/protocol/patterns';
import { readContent } from '$lib/protocol/read-content';
import { protocolContentSchema, type ProtocolContent } from '$scheduler/protocol/protocol-content';

/** The two-arm pattern, frozen as it opens with its comparison filled in. */
export function createPatternContent(): ProtocolContent {
	const draft = createPatternDraft('two-arms');
	Object.assign(draft.comparison, { effectD: 0.8, effectSource: 'pilot', peoplePerArm: 30 });
	const read = readContent(draft);
	if (!read.ok) throw new Error(JSON.stringify(read.faults));
	return read.content;
}

/** A protocol in which every optional part says something. */
export function createFullContent(): ProtocolContent {
	const pattern = createPatternContent();
	return protocolContentSchema.parse({
		...pattern,
		arms: [...pattern.arms, { key: 'yoked', name: 'Yoked', rule: 'yoked', master: 'adaptive' }],
		visits: pattern.visits.map((visit) =>
			visit.number === 2 ? { ...visit, armBlocks: { fixed: listedBlocks } } : visit
		),
		booking: { ...pattern.booking, dayMeaning: 'elapsed-hours' },
		limits: {
			...pattern.limits,
			shiftMax: 0.4,
			penaltyShareMax: 0.5,
			variableMax: { release_speed: 4 }
		},
		trialSeconds: 8,
		yoking: { leadHours: 20, orphan: 'plain-practice', late: 'wait' },
		missedDay: { rule: 'make-up', withinHours: 48, mostMissed: 1 },
		relaxation: [{ rule: 'gap-longest', by: 4, price: 2 }],
		instructions: [{ version: 'A', text: 'Slide the puck onto the line.' }],
		analysis: {
			outcomes: [
				{ name: 'Mean absolute error', unit: 'm', rank: 'primary', visitNumber: 8 },
				{ name: 'Covariation', unit: '', rank: 'secondary', visitNumber: 7 }
			],
			estimand: {
				population: 'everybody allocated',
				treatment: 'adaptive regions against plain practice',
				variable: 'mean absolute error at retention',
				events: [{ event: 'missed-practice-day', strategy: 'treatment-policy' }],
				summary: 'difference of means'
			},
			analysis: 'Two-sample t test.',
			exclusions: 'Trials outside the ranges.',
			stoppingRules: 'Pain of 4 or more stops the visit.',
			interimLooks: [0.5]
		},
		justifications: { 'no-washout': 'The aftereffect is the outcome.' }
	});
}

const listedBlocks = [
	{
		number: 1,
		purpose: 'shift',
		trials: 60,
		warmUpTrials: 5,
		restBetweenTrialsSeconds: 2,
		restAfterMinutes: 1,
		instruction: 'A',
		feedback: 'shown',
		shift: { from: 0, to: 0.3 }
	},
	{
		number: 2,
		purpose: 'region',
		trials: 60,
		region: { center: [2.4, 0.2], halfWidth: [0.1, 0.1] }
	},
	{ number: 3, purpose: 'rest', trials: 0, restMinutes: 5 },
	{ number: 4, purpose: 'transfer', trials: 40, targetOffset: 0.25, feedback: 'hidden' }
];
