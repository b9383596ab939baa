import { randomBytes } from 'node:crypto';
import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { simpleParser, type ParsedMail } from 'mailparser';
import { readCalendarPart, type CalendarPart } from './calendar-part';

export type Envelope = { from: string; to: string[] };

export type StoredMail = {
	id: string;
	/** When the mailbox took it, by this computer's clock. */
	receivedAt: string;
	/** What the mail itself says, by the sender's clock (the demo clock in a demo). */
	sentAt: string | null;
	envelope: Envelope;
	from: string;
	to: string[];
	subject: string;
	text: string;
	html: string | null;
	calendar: CalendarPart | null;
	attachments: { name: string; type: string; byteCount: number }[];
};

/** Mails of one mailbox: the received bytes as `.eml` files, and what was read out of them. */
export type MailStore = {
	add(source: Buffer, envelope: Envelope): Promise<StoredMail>;
	/** Newest first. */
	list(to?: string): StoredMail[];
	find(id: string): StoredMail | null;
	readSource(id: string): Promise<Buffer>;
	readAttachment(
		id: string,
		index: number
	): Promise<{ name: string; type: string; content: Buffer } | null>;
};

/** Opens the folder and reads the mails already in it. */
export async function openMailStore(folder: string): Promise<MailStore> {
	await mkdir(folder, { recursive: true });
	const mails = new Map<string, StoredMail>();
	let count = 0;
	for (const file of (await readdir(folder)).filter((name) => name.endsWith('.eml')).sort()) {
		const id = file.slice(0, -'.eml'.length);
		const mail = await readStored(folder, id);
		mails.set(id, mail);
	}
	const sourceOf = (id: string) => readFile(join(folder, `${id}.eml`));
	return {
		async add(source, envelope) {
			const receivedAt = new Date();
			const id = nameMail(receivedAt, count++);
			const note = JSON.stringify({ receivedAt: receivedAt.toISOString(), envelope });
			await writeWhole(join(folder, `${id}.json`), note);
			await writeWhole(join(folder, `${id}.eml`), source);
			const mail = await readStored(folder, id);
			mails.set(id, mail);
			return mail;
		},
		list(to) {
			const all = [...mails.values()].reverse();
			return to ? all.filter((mail) => isFor(mail, to)) : all;
		},
		find: (id) => mails.get(id) ?? null,
		readSource: sourceOf,
		async readAttachment(id, index) {
			const found = (await simpleParser(await sourceOf(id))).attachments[index];
			if (!found) return null;
			return {
				name: nameAttachment(found.filename, found.contentType),
				type: found.contentType,
				content: found.content
			};
		}
	};
}

function isFor(mail: StoredMail, address: string): boolean {
	const wanted = address.trim().toLowerCase();
	return [...mail.envelope.to, ...mail.to].some((one) => one.toLowerCase().includes(wanted));
}

/** Sorts by arrival, also within one millisecond and across restarts. */
function nameMail(receivedAt: Date, count: number): string {
	const stamp = receivedAt.toISOString().replace(/\D/g, '');
	return `${stamp}-${String(count).padStart(6, '0')}-${randomBytes(4).toString('hex')}`;
}

async function writeWhole(file: string, content: string | Buffer): Promise<void> {
	await writeFile(`${file}.part`, content, { mode: 0o600 });
	await rename(`${file}.part`, file);
}

async function readStored(folder: string, id: string): Promise<StoredMail> {
	const source = await readFile(join(folder, `${id}.eml`));
	const note = JSON.parse(await readFile(join(folder, `${id}.json`), 'utf8')) as {
		receivedAt: string;
		envelope: Envelope;
	};
	const parsed = await simpleParser(source, { skipImageLinks: true });
	return { id, ...note, ...readParsed(parsed) };
}

function readParsed(parsed: ParsedMail): Omit<StoredMail, 'id' | 'receivedAt' | 'envelope'> {
	const calendarFile = parsed.attachments.find(({ contentType }) =>
		['text/calendar', 'application/ics'].includes(contentType)
	);
	return {
		sentAt: parsed.date?.toISOString() ?? null,
		from: parsed.from?.text ?? '',
		to: [parsed.to ?? []].flat().map((one) => one.text),
		subject: parsed.subject ?? '(no subject)',
		text: parsed.text ?? '',
		html: parsed.html || null,
		calendar: calendarFile ? readCalendarPart(calendarFile.content.toString('utf8')) : null,
		attachments: parsed.attachments.map(({ filename, contentType, size }) => ({
			name: nameAttachment(filename, contentType),
			type: contentType,
			byteCount: size
		}))
	};
}

function nameAttachment(name: string | undefined, type: string): string {
	return name ?? (type === 'text/calendar' ? 'calendar part' : 'unnamed');
}
