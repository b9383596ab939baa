const words: Record<string, string> = {
	'study-created': 'created the study',
	'protocol-draft-started': 'started a new draft of the protocol',
	'protocol-frozen': 'froze a version of the protocol',
	'sign-off': 'gave a word on a version',
	'ethics-approval-recorded': 'recorded an ethics approval',
	'ethics-approval-revoked': 'revoked an ethics approval',
	'ethics-letter-kept': 'kept the letter of an ethics approval',
	'moved-to-version': 'moved one person over to an amended version',
	'comment-written': 'commented on the protocol',
	'comment-resolved': 'settled a comment on the protocol',
	'comment-reopened': 'opened a comment on the protocol again',
	'protocol-imported': 'imported a protocol into the draft',
	'allocation-sealed': 'sealed the allocation',
	'role-given': 'gave a role',
	'role-confirmed': 'confirmed a role',
	'role-ended': 'ended a role',
	'people-enrolled': 'enrolled people',
	'contact-opened': 'opened contact data',
	'contact-changed': 'changed contact data',
	'consent-recorded': 'recorded a consent',
	'person-withdrawn': 'recorded a withdrawal',
	'visit-cancelled': 'cancelled a visit',
	'visit-answered': 'answered an invitation',
	'visit-attended': 'recorded that a visit took place',
	'visit-missed': 'recorded that nobody came',
	'request-settled': 'settled a request',
	'invitation-sent-again': 'sent an invitation again',
	'trials-uploaded': 'stored a trial file',
	'baseline-passed': 'passed the baseline data',
	'participant-allocated': 'allocated one person',
	'decision-made': 'decided a block',
	'decision-settled': 'settled a held decision',
	'decision-fallback': 'let the fallback run',
	'block-issued': 'issued the file of a block'
};

/** What an event was, as the end of a sentence that begins with who. */
export function describeEvent(kind: string): string {
	return words[kind] ?? kind.replaceAll('-', ' ');
}
