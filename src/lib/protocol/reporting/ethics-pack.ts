import { gap, said, withOpenLink, type Answer, type DocumentFacts } from './document-facts';
import { factAnswers } from './fact-answers';

export type PackPart = { title: string; answer: Answer };

/** What a board asks for, each with where it is printed or what is missing. */
export function listPackParts(facts: DocumentFacts): PackPart[] {
	const print = `${facts.base}/protocol/print?version=${facts.number}`;
	const parts: PackPart[] = [
		{ title: 'Protocol', answer: said(`version ${facts.number}, printable`, print) },
		{ title: 'Schedule of assessments', answer: said('one page', `${print}#schedule`) },
		{ title: 'Burden of each arm', answer: said('visits, hours, span, trials', `${print}#burden`) },
		{ title: 'Consent text', answer: factAnswers.consent(facts) },
		{
			title: 'Words of the consent text',
			answer: gap('The text itself is not kept here; add the file that people sign.')
		},
		{
			title: 'Mails to participants',
			answer: said(
				'invitation, move, cancellation and withdrawal, as sent; public title only',
				`${facts.base}/messages`
			)
		},
		{ title: 'Pay', answer: gap('What people are paid is not in the protocol.') },
		{ title: 'Approved envelope', answer: factAnswers.envelope(facts) },
		{ title: 'Limits', answer: factAnswers.limits(facts) },
		{ title: 'Stopping rules', answer: factAnswers.stopping(facts) },
		{ title: 'Blinding', answer: factAnswers.blinding(facts) },
		{ title: 'Confidentiality', answer: factAnswers.confidentiality(facts) },
		{ title: 'Statistician’s sign-off', answer: factAnswers.signOff(facts) },
		{ title: 'Changes since the first version', answer: factAnswers.amendments(facts) },
		{
			title: 'Risk file of a powered rig',
			answer: gap('Set and checked by qualified staff at the lab; add their document.')
		}
	];
	return parts.map(({ title, answer }) => ({ title, answer: withOpenLink(answer, facts) }));
}
