import type { ProtocolContent } from '$scheduler/protocol/protocol-content';

/** Everything about a version that reports, registries and boards ask for; nothing of any person. */
export type DocumentFacts = {
	content: ProtocolContent;
	/** Whether the reader may know how blocks are chosen. */
	withRule: boolean;
	number: number;
	hash: string;
	frozenOn: string;
	frozenBy: string;
	reason: string;
	workingTitle: string;
	publicTitle: string;
	labName: string;
	phone: string;
	approvals: readonly {
		board: string;
		reference: string;
		from: string;
		to: string;
		state: string;
	}[];
	/** Who signed this hash off, and on which day; null while nobody did. */
	signedOff: { by: string; on: string } | null;
	/** Members by what they are in the study. */
	team: readonly { role: string; name: string }[];
	isSealed: boolean;
	versionCount: number;
	/** Address of the study's pages. */
	base: string;
	/** Pages of the study that the reader does not open, such as '/power'. */
	shut: readonly string[];
};

/** What an item of a checklist gets: a value with where it stands, a gap, or no value for this reader. */
export type Answer =
	/** Without an address where the reader's roles do not open the page. */
	| { state: 'said'; text: string; href: string | null }
	| { state: 'gap'; missing: string }
	| { state: 'hidden'; text: string };

export const said = (text: string, href: string | null): Answer => ({
	state: 'said',
	text,
	href
});

/** The answer without the address of a page that the reader does not open. */
export function withOpenLink(answer: Answer, { base, shut }: DocumentFacts): Answer {
	if (answer.state !== 'said' || answer.href === null) return answer;
	const page = answer.href.slice(base.length);
	return shut.some((path) => page.startsWith(path)) ? { ...answer, href: null } : answer;
}
export const gap = (missing: string): Answer => ({ state: 'gap', missing });
/** For values of the rule: told to who may read it, left out and said so for others. */
export const ofRule = ({ withRule }: DocumentFacts, answer: () => Answer): Answer =>
	withRule
		? answer()
		: { state: 'hidden', text: 'Said in the protocol, and left out here for your role.' };
