/** What becomes of somebody in flight under an amendment, in the words of the list by code. */
export const followerWords = {
	follows: 'follows it',
	over: 'has finished or left',
	keeps: 'keeps theirs, as declared',
	'chain-differs': 'keeps theirs: booked visits or arm do not fit',
	'needs-consent': 'goes on as before until the new consent is recorded',
	stopped: 'stopped until the new consent is recorded',
	'not-yet': 'follows once it is in force',
	'after-visit': 'follows after the visit that is decided already',
	due: 'is being moved over'
} as const;
