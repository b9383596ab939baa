import { formatWithZone } from '$lib/time/format-instant';
import type { MailContent } from '$lib/server/mail/mail-content';

/** A mail to a member of a laboratory's team: its subject and its words. */
export interface TeamMailText {
	subject: string;
	content: MailContent;
}

const english = { language: 'en', direction: 'ltr' } as const;

/** The link that signs a member in. */
export function writeSignInMail(facts: { link: string; validMinutes: number }): TeamMailText {
	return {
		subject: 'Your sign-in link',
		content: {
			...english,
			title: 'Sign in to Ovalry',
			blocks: [
				{
					kind: 'paragraph',
					text: `This link signs you in. It works once, for ${facts.validMinutes} minutes.`
				},
				{ kind: 'link', text: 'Sign in to Ovalry', url: facts.link },
				{
					kind: 'paragraph',
					text: 'If you did not ask for it, do nothing: nobody can sign in without this mail.'
				}
			],
			footer: 'Sent by Ovalry, because somebody asked to sign in with this address.'
		}
	};
}

/** The link by which a new member joins a laboratory's team. */
export function writeMemberInvitation(facts: {
	link: string;
	labName: string;
	labZone: string;
	inviterName: string;
	/** What they are asked to do, in plain words: 'coordinator of “Practising a movement”'. */
	roles: string[];
	expiresAtMs: number;
}): TeamMailText {
	const { labName, inviterName, roles } = facts;
	const roleText = roles.length === 0 ? [] : [{ label: 'Your part', value: roles.join('\n') }];
	const until = formatWithZone(facts.expiresAtMs, facts.labZone);
	return {
		subject: `${labName} invites you to its team`,
		content: {
			...english,
			title: `Join the team of ${labName}`,
			blocks: [
				{
					kind: 'paragraph',
					text: `${inviterName} invites you to work with ${labName} in Ovalry, where its studies are planned and run.`
				},
				{ kind: 'facts', rows: [...roleText, { label: 'This link works until', value: until }] },
				{ kind: 'link', text: `Join ${labName}`, url: facts.link },
				{
					kind: 'paragraph',
					text: 'There is no password: you sign in by a link to this address, or with your institution’s account. If you did not expect this, do nothing.'
				}
			],
			footer: `Sent by Ovalry for ${labName}, because ${inviterName} entered this address.`
		}
	};
}
