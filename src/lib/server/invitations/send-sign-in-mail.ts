import { randomUUID } from 'node:crypto';
import { createClock } from '$lib/server/clock';
import type { Settings } from '$lib/server/config';
import { buildMailMessage, domainOf } from '$lib/server/mail/mail-message';
import { renderMailHtml } from '$lib/server/mail/render-mail-html';
import { renderMailText } from '$lib/server/mail/render-mail-text';
import { createMailSender } from '$lib/server/mail/send-mail';
import { findTransportOptions } from '$lib/server/mail/transport-options';
import { writeMemberInvitation, writeSignInMail, type TeamMailText } from './team-mail';

type Party = { name: string; email: string };
const SIGN_IN_MINUTES = 30;

/** Mails a sign-in link at once; it is not kept in the outbox, as it is worth nothing in half an hour. */
export async function sendSignInMail(
	settings: Settings,
	{ to, link }: { to: Party; link: string }
): Promise<void> {
	const text = writeSignInMail({ link, validMinutes: SIGN_IN_MINUTES });
	await sendTeamMail(settings, { to, text });
}

/** Mails a new member the link by which they join. */
export async function sendMemberInvitation(
	settings: Settings,
	{ to, ...facts }: { to: Party } & Parameters<typeof writeMemberInvitation>[0]
): Promise<void> {
	await sendTeamMail(settings, { to, text: writeMemberInvitation(facts) });
}

/** @throws Error when the mail server did not take the mail: the person who waits is told so. */
async function sendTeamMail(
	settings: Settings,
	{ to, text }: { to: Party; text: TeamMailText }
): Promise<void> {
	const mail = await buildMailMessage({
		from: { name: 'Ovalry', email: settings.MAIL_FROM },
		to,
		messageId: `<${randomUUID()}@${domainOf(settings.MAIL_FROM)}>`,
		// sign-in links live by the system's clock, not by the demo's
		sentAtMs: createClock(0).now(),
		subject: text.subject,
		text: renderMailText(text.content),
		html: renderMailHtml(text.content),
		language: text.content.language
	});
	const outcome = await createMailSender(findTransportOptions(settings)).send(mail);
	if (outcome.state === 'sent') return;
	throw new Error(`The mail server did not take the mail: ${outcome.reason} (${outcome.detail})`);
}
