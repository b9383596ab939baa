import { variantWords } from './variant-words';

export type VariantChoice = { key: string; label: string; means: string; costs: string };

const choices: readonly VariantChoice[] = [
	{
		key: 'open-investigator',
		label: 'The investigator is not blinded',
		means:
			'Sees arms, blocks, trials, scores and decisions, and may then hold no role that runs the study.',
		costs: 'the study is not investigator-blind; whoever designed it could act on what they saw.'
	},
	{
		key: 'open-operator',
		label: 'The operator is not blinded',
		means:
			'Rig parameters are set by hand, so that the operator sees them. Arms may then differ in blocks.',
		costs: 'the operator may infer the arm: what they say and do at the rig is a possible cause.'
	},
	{
		key: 'operator-sees-display',
		label: 'The operator sees the task’s display',
		means: 'Nothing else is shown to them.',
		costs: 'the operator may infer the arm from what is on the display.'
	},
	{
		key: 'small-team',
		label: 'One person approves and holds the allocation',
		means: 'Two people can then run a study beside whoever designs it.',
		costs: 'who settles held decisions knows every arm and what comes next.'
	},
	{
		key: 'feedback-to-participant',
		label: 'Participants see their own scores',
		means: 'Their own only, after a visit.',
		costs: 'scores are part of the treatment: people may practise for them.'
	},
	{
		key: 'pilot',
		label: 'There are pilot people',
		means:
			'Marked before the first allocation, never allocated, counted or pooled; the team sees their data.',
		costs: 'how many, and what was changed because of them.'
	}
];

/** Every exception that may be declared; one that an earlier version declared is not lost. */
export function listVariantChoices(declared: readonly string[]): VariantChoice[] {
	const known = new Set(choices.map(({ key }) => key));
	const others = declared.filter((key) => !known.has(key));
	return [
		...choices,
		...others.map((key) => ({
			...{ key, label: key.replaceAll('-', ' '), means: variantWords(key) },
			costs: 'declared by an earlier version.'
		}))
	];
}
