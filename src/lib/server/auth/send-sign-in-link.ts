import type { Settings } from '$lib/server/config';
import type { Database } from '$lib/server/db/client';
import { findMemberByEmail } from '$lib/server/members/find-member';
import { sendSignInMail } from '$lib/server/invitations/send-sign-in-mail';
import { confirmAddress } from './make-sign-in-link';

type Request = { db: Database; settings: Settings; email: string; callbackUrl: string };

/**
 * Mails a sign-in link to a member; does nothing, and says nothing, for an unknown address.
 * The link opens a page with a button, so that a mail scanner's visit does not use it up.
 */
export async function sendSignInLink({ db, settings, email, callbackUrl }: Request): Promise<void> {
	const member = await findMemberByEmail(db, email);
	if (!member) return;
	const link = Object.fromEntries(new URL(callbackUrl).searchParams);
	await sendSignInMail(settings, { to: member, link: confirmAddress(settings, link) });
}
