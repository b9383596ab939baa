import nodemailer from 'nodemailer';
import type { Settings } from '$lib/server/config';
import { findTransportOptions } from '$lib/server/mail/transport-options';

type SignInMail = { to: { name: string; email: string }; link: string };

/** Mails a sign-in link at once; it is not kept in the outbox, as it is worth nothing in half an hour. */
export async function sendSignInMail(settings: Settings, { to, link }: SignInMail): Promise<void> {
	const { host, port, secure, user, password } = findTransportOptions(settings);
	const transport = nodemailer.createTransport({
		host,
		port,
		secure,
		...(user ? { auth: { user, pass: password ?? '' } } : {}),
		disableFileAccess: true,
		disableUrlAccess: true
	});
	await transport.sendMail({
		from: { name: 'Ovalry', address: settings.MAIL_FROM },
		to: { name: to.name, address: to.email },
		subject: 'Your sign-in link',
		text: `Open this link within 30 minutes to sign in to Ovalry:\n\n${link}\n\nIt works once. If you did not ask for it, do nothing.\n`,
		headers: { 'Auto-Submitted': 'auto-generated' }
	});
}
