import type { WorkContext } from '$lib/server/jobs/start-work';
import { createMailSender } from '$lib/server/mail/send-mail';
import { findTransportOptions } from '$lib/server/mail/transport-options';
import { runtimeKeys } from '$lib/server/runtime';
import { sendDueMail } from './send-due-mail';

/** Sends what is due from the outbox: work of the second process, looked at every second. */
export async function workMail({ db, clock, settings, log }: WorkContext): Promise<void> {
	const sender = createMailSender(findTransportOptions(settings));
	const run = await sendDueMail(db, clock, { sender, keys: runtimeKeys().folder });
	if (run.sent + run.retried + run.failed + run.unknown > 0) log.info({ mail: run });
}
