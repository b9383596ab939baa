import type postgres from 'postgres';
import { openMail } from '$lib/server/invitations/sealed-mail';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import type { Answer, Filling } from './ask-everything';

type Row = {
	code: string;
	participantId: string;
	visitNumber: number | null;
	kind: string;
	sequence: number;
	sealed: Buffer;
	rest: string;
};

/**
 * Every mail of the outbox, opened with the person's key, in the order in which they leave: what a
 * participant, or whoever reads along on the way, can see of it.
 */
export async function readMails(
	sql: postgres.Sql,
	keys: PeopleKeys
): Promise<{ mails: Answer[]; links: Filling[] }> {
	const rows = await sql<Row[]>`
		select p.code, p.id as "participantId", k.visit_number as "visitNumber", o.kind, o.sequence,
			o.sealed,
			concat_ws(' ', o.state, o.due_at, o.attempts, o.is_urgent, o.created_at, o.sent_at,
				octet_length(o.sealed)) as rest
		from outbox o join participant p on p.id = o.participant_id
			left join booking k on k.id = o.booking_id
		order by o.due_at, o.created_at, p.code, k.visit_number, o.sequence, o.kind`;
	const mails: Answer[] = [];
	const links: Filling[] = [];
	for (const row of rows) {
		const says = `${row.code} visit ${row.visitNumber ?? 'none'} ${row.kind} ${row.sequence}`;
		const opened = await openMail(keys.folder, row.participantId, new Uint8Array(row.sealed));
		if (!opened.ok) throw new Error(`${says}: its key is gone`);
		const mime = Buffer.from(opened.mail.mime).toString('utf8');
		mails.push({
			ask: `mail ${says}`,
			status: 0,
			headers: [row.rest, opened.mail.envelope.from, opened.mail.envelope.to],
			body: mime
		});
		const token = /\/visit\/([A-Za-z0-9_-]{43})/.exec(mime.replace(/=\r?\n/g, ''))?.[1];
		if (token && (row.visitNumber ?? 1) <= 3) links.push({ says, values: { token } });
	}
	return { mails, links };
}
