import type { Feedback } from '$scheduler/policies/obligation-settings';
import { blockParametersSchema, type BlockParameters } from '$scheduler/policies/policy-memory';
import { formatDecimal, formatPercent, formatResult } from '$scheduler/policies/words/read-values';
import { describeKind } from './kind-words';

/** One fact about a block: what it is called and what it is. */
export type ParameterLine = { term: string; text: string };

type Say<Name extends keyof BlockParameters> = (
	value: NonNullable<BlockParameters[Name]>,
	unit: string
) => ParameterLine[];

const line = (term: string, text: string): ParameterLine[] => [{ term, text }];

const feedbackWords: Readonly<Record<Feedback, string>> = {
	shown: 'the result is shown after each trial',
	hidden: 'no result is shown',
	'clamped-to-zero': 'every trial is shown as perfect, whatever the person does',
	'clamped-to-noise': 'an error is shown that does not depend on what the person does'
};

/** One entry for every parameter that a block can carry: a new one fails the type check here. */
const says: { readonly [Name in keyof Required<BlockParameters>]: Say<Name> } = {
	trials: (trials) => line('Length', trials === 0 ? 'no trials' : `${trials} trials`),
	region: ({ share, stay, lean, catch: caught }) => [
		...line(
			'Penalized region',
			`made to catch ${formatPercent(share)} of the next trials; ${formatPercent(stay)} would hit outside it without moving`
		),
		...(lean
			? line(
					'Leaning',
					`${formatDecimal(lean, 2)} own SD beside the person’s mean${caught === undefined ? '' : `, where it catches ${formatPercent(caught)}`}`
				)
			: [])
	],
	blockOfRegion: (number) => line('This region', `block ${number} under it`),
	rule: ({ goal, sigma }, unit) =>
		line(
			'Goal of the shift',
			`${formatResult(goal, unit)}; one SD of the person’s own result is ${formatResult(sigma, unit)}`
		),
	state: ({ passed }, unit) => line('Followed so far', formatResult(passed, unit)),
	level: (level, unit) => line('Target at the start', `moved by ${formatResult(level, unit)}`),
	firstStep: (step, unit) => line('First step', formatResult(step, unit)),
	step: (step, unit) => line('Later steps', formatResult(step, unit)),
	granularity: (granularity) =>
		line(
			'The target moves',
			granularity === 'trial' ? 'inside the block, trial by trial' : 'between blocks only'
		),
	hold: (trials) => line('Held at each level', `about ${trials} trials`),
	retained: (share) => line('Kept over the gap', `about ${formatPercent(share)} of the level`),
	levels: (levels, unit) =>
		levels.length === 0
			? []
			: line(
					'Course of the target',
					`the partner’s, trial by trial, from ${formatResult(Math.min(...levels), unit)} to ${formatResult(Math.max(...levels), unit)}`
				),
	obligation: (place) => line('Due by the protocol', `number ${place + 1} of its due blocks`),
	feedback: (feedback) => line('Feedback', feedbackWords[feedback]),
	clampSd: (sd, unit) => line('Shown error', `noise with an SD of ${formatResult(sd, unit)}`),
	targetOffset: (offset, unit) =>
		line('Other target', `${formatResult(offset, unit)} beside the usual one`),
	fallback: ({ kind, trials }) =>
		line('Until somebody has looked', `${describeKind(kind)}, ${trials} trials`)
};

const names = blockParametersSchema.keyof();

/** Everything a block needs to be run, as terms and plain words with units. */
export function describeParameters(parameters: BlockParameters, unit: string): ParameterLine[] {
	return names.options.flatMap((name) => describeOne(name, parameters, unit));
}

function describeOne<Name extends keyof BlockParameters>(
	name: Name,
	parameters: BlockParameters,
	unit: string
): ParameterLine[] {
	const value = parameters[name];
	if (value === undefined) return [];
	const say: Say<Name> = says[name];
	return say(value as NonNullable<BlockParameters[Name]>, unit);
}
