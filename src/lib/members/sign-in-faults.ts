export type SignInFault = { title: string; text: string };

const faults: Record<string, SignInFault> = {
	Verification: {
		title: 'This link does not work any more',
		text: 'It was used already, or it is older than it may be. Ask for a new one here; it takes a moment.'
	},
	AccessDenied: {
		title: 'This address belongs to no lab here',
		text: 'The sign-on itself worked. Ask the steward of your lab to invite the address that your university gives for you, or use the link by e-mail if you were invited under another one.'
	},
	OAuthCallbackError: {
		title: 'The sign-on at your university was not finished',
		text: 'It was left or refused there. Try once more, or use the link by e-mail.'
	},
	Configuration: {
		title: 'This way of signing in does not answer',
		text: 'Try the other one. If neither works, tell your steward; the log of the server names the fault.'
	}
};

/** What a failed sign-in says of itself; null when there was none. */
export function explainSignInFault(code: string | null): SignInFault | null {
	if (!code) return null;
	return (
		faults[code] ?? {
			title: 'Signing in did not work',
			text: 'Nothing was changed. Try once more, or the other way of signing in.'
		}
	);
}
