import type { DocumentFacts } from './document-facts';
import { factAnswers, type FactName } from './fact-answers';

type Field = [name: string, answer: FactName | ((facts: DocumentFacts) => string) | null];

/** Fields that registries of trials usually ask for, in their usual order; null: kept nowhere here. */
const fields: readonly Field[] = [
	['Public title', (facts) => facts.publicTitle],
	// Registries are public: the working title may say what participants must not know.
	['Scientific title', null],
	['Registry number', null],
	['Secondary identifiers', ({ number, hash }) => `version ${number}, SHA-256 ${hash}`],
	['Sponsor', null],
	['Funding', null],
	[
		'Contact for public queries',
		({ labName, phone }) => [labName, phone].filter(Boolean).join(', ')
	],
	['Contact for scientific queries', ({ frozenBy, labName }) => `${frozenBy}, ${labName}`],
	['Country of recruitment', null],
	['Condition or problem studied', null],
	['Interventions', 'arms'],
	['Inclusion and exclusion criteria', null],
	['Study type and design', 'design'],
	['Allocation', 'allocation'],
	['Blinding', 'blinding'],
	['Date of first enrolment', null],
	['Sample size', 'sampleSize'],
	['Recruitment status', null],
	['Primary and secondary outcomes', 'outcomes'],
	['Ethics review', 'ethics'],
	['Analysis', 'analysis'],
	['Stopping and interim looks', 'interim'],
	['Date of completion', null],
	['Plan for sharing data of individuals', null]
];

export type RegistryText = { text: string; gaps: string[] };

/** Registration fields as plain text, each with its value or marked as a gap, and the gaps again below. */
export function writeRegistryText(facts: DocumentFacts): RegistryText {
	const gaps: string[] = [];
	const lines = fields.map(([name, answer]) => {
		const value = readValue(answer, facts);
		if (value === null) gaps.push(name);
		return `${name}: ${value ?? '[to be filled in]'}`;
	});
	const rest = gaps.length === 0 ? 'none' : gaps.join('; ');
	return { text: [...lines, '', `Not in the protocol: ${rest}`, ''].join('\n'), gaps };
}

function readValue(answer: Field[1], facts: DocumentFacts): string | null {
	if (answer === null) return null;
	if (typeof answer === 'function') return answer(facts) || null;
	const found = factAnswers[answer](facts);
	return found.state === 'said' ? found.text : null;
}
