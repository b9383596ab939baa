/** The words of the trade, each said in plain ones. */
export const glossary: readonly { term: string; text: string }[] = [
	{
		term: 'adverse event',
		text: 'Harm or worry that came up in the study. It is reported at once.'
	},
	{
		term: 'allocation',
		text: 'The draw that gives a person their arm. It is sealed before the first person comes.'
	},
	{
		term: 'amendment',
		text: 'A later version of the protocol while the study runs. It has a date from which it counts.'
	},
	{ term: 'arm', text: 'A group of people who get the same kind of practice.' },
	{
		term: 'assumption',
		text: 'A number that power rests on, such as the size of the effect. Its source stands beside it.'
	},
	{ term: 'attendance', text: 'Whether a person came to a visit.' },
	{ term: 'attrition', text: 'People who stop before the end.' },
	{
		term: 'baseline',
		text: 'Trials before any practice. They show how a person moves at the start.'
	},
	{ term: 'blinding', text: 'Keeping from somebody what could sway them, such as a person’s arm.' },
	{ term: 'block', text: 'A run of trials without a change. Rest comes after it.' },
	{ term: 'booking', text: 'A visit with its day, hour, rig and staff.' },
	{ term: 'consent', text: 'A person’s yes to take part, with the text they read and the date.' },
	{ term: 'covariation', text: 'How well a person’s variables make up for each other.' },
	{ term: 'coverage', text: 'How much of the solution manifold a person’s trials reach.' },
	{
		term: 'day',
		text: 'A visit to the lab counts as a day of the study. One person has at most one a day.'
	},
	{ term: 'decision', text: 'The choice of a person’s next block, with the reason for it.' },
	{
		term: 'deviation',
		text: 'Something that went another way than the protocol says. It is written down.'
	},
	{ term: 'effect', text: 'How far two arms differ, in standard deviations.' },
	{ term: 'enrolment', text: 'Taking a person into the study.' },
	{
		term: 'error clamp',
		text: 'A block in which the shown error is always the same, whatever a person does.'
	},
	{
		term: 'execution variable',
		text: 'A number that a person sets with a movement, such as a speed.'
	},
	{
		term: 'invitation',
		text: 'The mail that asks a person to a visit. It lands in their calendar.'
	},
	{ term: 'maintenance', text: 'Blocks that keep up what was learnt.' },
	{ term: 'no-show', text: 'A booked visit to which nobody came.' },
	{ term: 'noise', text: 'The part of a person’s spread that harms the result.' },
	{
		term: 'override',
		text: 'A decision that an approver made in place of the rule, with a reason.'
	},
	{
		term: 'penalized region',
		text: 'A part of a person’s own movements in which trials do not count. It moves them elsewhere.'
	},
	{
		term: 'perturbation',
		text: 'A change of the task that a person must answer: a region or a shift.'
	},
	{ term: 'policy', text: 'The rule that chooses blocks: its aims, limits and steps.' },
	{ term: 'power', text: 'The chance to find an effect that is really there.' },
	{ term: 'practice', text: 'Trials without a change, to learn the task.' },
	{ term: 'probe', text: 'A short block without a change. It shows what was learnt so far.' },
	{
		term: 'protocol',
		text: 'What the study does, in full. A version of it never changes once frozen.'
	},
	{ term: 'recovery', text: 'An easier block after a hard one.' },
	{ term: 'reminder', text: 'A second mail shortly before a visit.' },
	{
		term: 'rest',
		text: 'A break between trials or blocks. It is part of the dose, so it is alike in every arm.'
	},
	{ term: 'result', text: 'How far a trial missed the target, with its sign.' },
	{ term: 'retention', text: 'A test after days without practice. It shows what has stayed.' },
	{ term: 'rig', text: 'The device on which people move.' },
	{ term: 'screening', text: 'Questions that tell whether a person can take part.' },
	{ term: 'solution manifold', text: 'All movements that hit the target exactly.' },
	{ term: 'staff', text: 'Members of the lab who run visits.' },
	{ term: 'stratum', text: 'A group, such as the mornings, in which the arms are balanced.' },
	{
		term: 'target shift',
		text: 'The target moves a little from trial to trial. People follow without being told.'
	},
	{ term: 'tolerance', text: 'How far a trial may miss and still counts as a hit.' },
	{ term: 'transfer', text: 'A test at another target. It shows whether learning carries over.' },
	{ term: 'trial', text: 'One movement with its result.' },
	{
		term: 'variability ellipsoid',
		text: 'The oval that holds most of a person’s trials. Its shape is that person’s own.'
	},
	{ term: 'visit', text: 'One booked stay at the lab.' },
	{ term: 'warm-up', text: 'The first trials of a block. They are run and not analysed.' },
	{ term: 'washout', text: 'Plain trials after a change, until it is forgotten.' },
	{ term: 'withdrawal', text: 'A person stops taking part, in whole or in part.' },
	{ term: 'yoked control', text: 'A person who gets exactly what a partner in another arm got.' }
];
