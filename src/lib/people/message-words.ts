/** Kinds and states of mails in words, for lists. */
export const messageNames = {
	invitation: 'invitation to',
	moved: 'update of',
	cancelled: 'cancellation of',
	withdrawn: 'confirmation of withdrawal'
} as const;

export const messageStates = {
	waiting: 'waits',
	sent: 'sent',
	superseded: 'replaced before it left',
	failed: 'could not be delivered',
	unknown: 'perhaps delivered'
} as const;
