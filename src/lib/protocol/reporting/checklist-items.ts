import type { FactName } from './fact-answers';

/** An item: its number, what it asks in our own words, and the fact that answers it or what is missing. */
export type ChecklistItem = {
	number: string;
	asks: string;
	answer: FactName | { missing: string };
};
export type Checklist = { key: string; title: string; note: string; items: ChecklistItem[] };

type Row = [number: string, asks: string, answer: FactName | { missing: string }];
const toItems = (rows: readonly Row[]): ChecklistItem[] =>
	rows.map(([number, asks, answer]) => ({ number, asks, answer }));
const lacks = (missing: string) => ({ missing });

// Numbers and short paraphrases are from memory: confirm against the published statements before quoting.
const fromMemory = 'Numbers and wording from memory; confirm before quoting.';

export const spirit: Checklist = {
	key: 'spirit',
	title: 'SPIRIT 2025, protocols of trials',
	note: fromMemory,
	items: toItems([
		['1a', 'title that names design and population', 'title'],
		['1b', 'summary of the trial', lacks('No structured summary is written.')],
		['2', 'protocol version and date', 'version'],
		['3a', 'names and roles of contributors', 'people'],
		['3b', 'sponsor and funders, and their part', lacks('Sponsor and funding are not kept.')],
		['3c', 'committees and oversight', 'monitor'],
		['4', 'registry and number', lacks('No registry number is kept.')],
		['5', 'where protocol and analysis plan can be read', 'version'],
		['6', 'sharing of data and code', lacks('No plan for sharing data is written.')],
		['7', 'conflicts of interest', lacks('Conflicts of interest are not kept.')],
		['8', 'plans for telling results', lacks('No plan for dissemination is written.')],
		['9a', 'background and why', lacks('No background is written.')],
		['9b', 'choice of comparators', 'arms'],
		['10', 'objectives', 'objective'],
		[
			'11',
			'involvement of participants in the design',
			lacks('Whether participants were involved is not written.')
		],
		['12', 'design of the trial', 'design'],
		['13', 'setting', 'setting'],
		[
			'14',
			'who may take part, and who delivers',
			lacks('Eligibility criteria are not in the protocol.')
		],
		['15a', 'interventions, enough to repeat them', 'interventions'],
		['15b', 'when an intervention is changed or stopped', 'stopping'],
		['15c', 'adherence', 'adherence'],
		[
			'15d',
			'care allowed or forbidden meanwhile',
			lacks('Other training or care meanwhile is not written.')
		],
		['16', 'outcomes with time and measure', 'outcomes'],
		[
			'17',
			'harms, how they are found',
			lacks('How harms are asked for and recorded is not written.')
		],
		['18', 'timeline of the participant, as a table', 'schedule'],
		['19', 'sample size and its assumptions', 'sampleSize'],
		['20', 'recruitment', lacks('How people are found is not written.')],
		['21', 'sequence generation', 'allocation'],
		['22', 'concealment of allocation', 'concealment'],
		['23', 'who enrols and who allocates', 'people'],
		['24', 'who is blinded, and how', 'blinding'],
		['25', 'data collection', 'dataCollection'],
		['26', 'data management', 'dataCollection'],
		['27a', 'statistical methods', 'analysis'],
		['27b', 'who is analysed, missing data', 'estimand'],
		['28a', 'data monitoring committee', 'monitor'],
		['28b', 'interim looks and stopping', 'interim'],
		['29', 'monitoring of conduct', 'monitor'],
		['30', 'ethics approval', 'ethics'],
		['31', 'how amendments are agreed and told', 'amendments'],
		['32', 'who asks for consent, and how', 'consent'],
		['33', 'confidentiality', 'confidentiality'],
		[
			'34',
			'care after the trial, compensation of harm',
			lacks('Care and compensation after harm are not written.')
		]
	])
};

export const tidier: Checklist = {
	key: 'tidier',
	title: 'TIDieR, description of interventions',
	note: fromMemory,
	items: toItems([
		['1', 'brief name', 'arms'],
		['2', 'why: rationale of its elements', lacks('The rationale of each element is not written.')],
		['3', 'what: materials', 'task'],
		['4', 'what: procedures', 'interventions'],
		['5', 'who provided', 'operators'],
		['6', 'how: mode of delivery', 'instructions'],
		['7', 'where', 'setting'],
		['8', 'when and how much', 'schedule'],
		['9', 'tailoring: what, why, when, how', 'rule'],
		['10', 'modifications during the study', 'amendments'],
		['11', 'how well, planned: adherence', 'adherence'],
		[
			'12',
			'how well, actual',
			lacks('Known when the study is over: visits attended and blocks run as decided.')
		]
	])
};

export const consort: Checklist = {
	key: 'consort',
	title: 'CONSORT 2025 with the extension for adaptive designs (ACE)',
	note: `${fromMemory} Results can be filled only after the study; “A” marks what the extension asks. It was made for designs that adapt a whole trial; here the rule adapts within a person.`,
	items: toItems([
		['1a', 'randomised in the title', 'title'],
		['1b', 'structured summary', lacks('No structured summary is written.')],
		['2', 'registration', lacks('No registry number is kept.')],
		['3', 'where protocol and analysis plan can be read', 'version'],
		['4', 'sharing of data and code', lacks('No plan for sharing data is written.')],
		['5', 'funding and conflicts', lacks('Funding and conflicts are not kept.')],
		['6', 'background', lacks('No background is written.')],
		['7', 'objectives', 'objective'],
		[
			'8',
			'involvement of participants',
			lacks('Whether participants were involved is not written.')
		],
		['9', 'design', 'design'],
		['A 9', 'adaptive design: type, and why', 'rule'],
		['A 9b', 'planned adaptations and what they rest on', 'guardRails'],
		['10', 'changes after start, with reasons', 'amendments'],
		['11', 'setting', 'setting'],
		['12', 'eligibility', lacks('Eligibility criteria are not in the protocol.')],
		['13', 'interventions', 'interventions'],
		['A 13', 'largest dose that adapting may reach', 'envelope'],
		['14', 'outcomes', 'outcomes'],
		['15', 'harms', lacks('How harms are asked for and recorded is not written.')],
		['16a', 'sample size', 'sampleSize'],
		['16b', 'interim looks and stopping', 'interim'],
		[
			'A 16',
			'properties of the design by simulation',
			lacks(
				'False triggers and time to target of the rule are shown in the workbench, not kept with the version.'
			)
		],
		['17', 'sequence generation', 'allocation'],
		['18', 'concealment', 'concealment'],
		['19', 'who enrols, who allocates', 'people'],
		['20', 'blinding', 'blinding'],
		['A 20', 'who knew interim results, and how this was kept', 'blinding'],
		['21', 'statistical methods', 'analysis'],
		['A 21', 'analysis that allows for the adaptation', 'estimand'],
		['22', 'flow of participants', lacks('Known when the study is over.')],
		['23', 'dates of recruitment', lacks('Known when the study is over.')],
		['24', 'interventions as delivered', lacks('Known when the study is over.')],
		['25', 'baseline data', lacks('Known when the study is over.')],
		['26', 'numbers analysed, results, harms', lacks('Known when the study is over.')],
		[
			'A 26',
			'decisions taken, and departures from the rule',
			lacks('Known when the study is over: every decision is kept with its reason.')
		],
		['27', 'interpretation', lacks('Written with the report.')],
		['28', 'limitations', lacks('Written with the report.')]
	])
};

export const checklists: readonly Checklist[] = [spirit, tidier, consort];
