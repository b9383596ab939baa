import type { MailBlock, MailContent } from '$lib/server/mail/mail-content';
import { visitTimeText, type VisitTime } from './visit-time';
import { wordsFor, type InvitationWords } from './words';

export interface WithdrawalMailFacts {
	language: string;
	publicTitle: string;
	participant: { name: string; zone: string };
	lab: { name: string; phone: string; email: string };
	/** The visits that were booked and told of, now cancelled. */
	cancelledVisits: (VisitTime & { visitNumber: number })[];
}

/** Confirms to a participant that they have stopped taking part, and what follows. */
export function writeWithdrawalMail(facts: WithdrawalMailFacts): {
	subject: string;
	content: MailContent;
} {
	const words = wordsFor(facts.language);
	const { publicTitle, participant, lab } = facts;
	const contact = lab.phone === '' ? [] : [{ label: words.labelCall(), value: lab.phone }];
	return {
		subject: words.withdrawnSubject(),
		content: {
			language: words.language,
			direction: words.direction,
			title: words.withdrawnTitle(publicTitle),
			blocks: [
				{ kind: 'paragraph', text: words.greeting(participant.name) },
				{ kind: 'paragraph', text: words.withdrawnLead() },
				...visitBlocks(facts, words),
				{ kind: 'paragraph', text: words.withdrawnContact() },
				{ kind: 'facts', rows: [...contact, { label: words.labelWrite(), value: lab.email }] }
			],
			footer: words.withdrawnFooter(lab.name, publicTitle)
		}
	};
}

function visitBlocks(facts: WithdrawalMailFacts, words: InvitationWords): MailBlock[] {
	const { cancelledVisits, participant } = facts;
	if (cancelledVisits.length === 0) {
		return [{ kind: 'paragraph', text: words.withdrawnNoVisits() }];
	}
	const rows = cancelledVisits.map((visit) => ({
		label: words.labelVisit(visit.visitNumber),
		value: visitTimeText(visit, participant.zone, words.language)
	}));
	return [
		{ kind: 'paragraph', text: words.withdrawnVisits() },
		{ kind: 'facts', rows },
		{ kind: 'paragraph', text: words.withdrawnCalendar() }
	];
}
