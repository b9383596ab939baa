import { checklists, type Checklist } from './checklist-items';
import { withOpenLink, type Answer, type DocumentFacts } from './document-facts';
import { factAnswers } from './fact-answers';

export type FilledItem = { number: string; asks: string; answer: Answer };
export type FilledChecklist = {
	key: string;
	title: string;
	note: string;
	items: FilledItem[];
	gapCount: number;
};

/** Every checklist with a value and its place for each item, or with what is missing. */
export function fillChecklists(facts: DocumentFacts): FilledChecklist[] {
	return checklists.map((checklist) => fillChecklist(checklist, facts));
}

function fillChecklist(
	{ key, title, note, items }: Checklist,
	facts: DocumentFacts
): FilledChecklist {
	const filled = items.map(({ number, asks, answer }) => ({
		number,
		asks,
		answer:
			typeof answer === 'string'
				? withOpenLink(factAnswers[answer](facts), facts)
				: ({ state: 'gap', missing: answer.missing } as const)
	}));
	const gapCount = filled.filter(({ answer }) => answer.state === 'gap').length;
	return { key, title, note, items: filled, gapCount };
}
