import type { Follows, Renewal, WithoutRenewal } from '$lib/protocol/amendment';

/** How somebody of a running study stands towards an amendment. */
export type FollowerState =
	/** Follows it, by enrolment or because they were moved over. */
	| 'follows'
	/** Has finished or left: nothing changes for them. */
	| 'over'
	/** Keeps their version, as the amendment declares. */
	| 'keeps'
	/** Keeps their version: their booked visits or their arm do not fit. */
	| 'chain-differs'
	/** Must consent anew first; meanwhile goes on as before. */
	| 'needs-consent'
	/** Must consent anew; until then nothing is booked or issued. */
	| 'stopped'
	/** The amendment does not act yet: its date, sign-off, approval or seal is missing. */
	| 'not-yet'
	/** Is moved over once the visit that is decided already is over. */
	| 'after-visit'
	/** Is moved over at the next opportunity. */
	| 'due';

export type Follower = {
	follows: boolean;
	isOver: boolean;
	/** Has a visit that is booked or was attended, or is allocated. */
	isInChain: boolean;
	hasConsented: boolean;
	/** A visit of theirs is under way, or a block of one to come is decided already. */
	isMidVisit: boolean;
};

export type AmendmentInForce = {
	follows: Follows;
	renewal: Renewal;
	withoutRenewal: WithoutRenewal;
	/** Whether it is the version that runs, on or after its date. */
	runs: boolean;
	/** Whether visits or arms differ from the version that the person follows. */
	chainDiffers: boolean;
};

/** What becomes of one person; the only place that decides it. */
export function findFollowerState(person: Follower, amendment: AmendmentInForce): FollowerState {
	if (person.follows) return 'follows';
	if (person.isOver) return 'over';
	if (amendment.follows === 'new-people') return 'keeps';
	if (amendment.chainDiffers && person.isInChain) return 'chain-differs';
	const lacksConsent = amendment.renewal !== 'nobody' && !person.hasConsented;
	if (lacksConsent && amendment.runs && amendment.withoutRenewal === 'stops') return 'stopped';
	if (lacksConsent) return 'needs-consent';
	if (!amendment.runs) return 'not-yet';
	return person.isMidVisit ? 'after-visit' : 'due';
}
