import { setTimeout as wait } from 'node:timers/promises';
import type { StoredMail } from '../../src/worker/mailbox/mail-store';

export type { StoredMail };

/** The local mailbox, as a test reads it. */
export type Mailbox = {
	url: string;
	/** Newest first; all of them, or those to one address. */
	list(to?: string): Promise<StoredMail[]>;
	/** The raw bytes, as received. */
	readSource(id: string): Promise<string>;
	/** The newest mail to an address that fits; waits for it to arrive. */
	waitFor(
		to: string,
		fits?: (mail: StoredMail) => boolean,
		timeoutMs?: number
	): Promise<StoredMail>;
	/** Waits long enough for the worker to have sent something, and says what arrived meanwhile. */
	arrivalsWithin(ms: number, to?: string): Promise<StoredMail[]>;
};

export function openMailbox(url: string): Mailbox {
	const list = async (to = '') => {
		const reply = await fetch(`${url}/mails?to=${encodeURIComponent(to)}`);
		return (await reply.json()) as StoredMail[];
	};
	return {
		url,
		list,
		readSource: async (id) => (await fetch(`${url}/mail/${id}/raw`)).text(),
		async waitFor(to, fits = () => true, timeoutMs = 15_000) {
			const until = Date.now() + timeoutMs;
			for (;;) {
				const found = (await list(to)).find(fits);
				if (found) return found;
				if (Date.now() > until) throw new Error(await describeMissing(to, list));
				await wait(100);
			}
		},
		async arrivalsWithin(ms, to) {
			const before = new Set((await list(to)).map(({ id }) => id));
			await wait(ms);
			return (await list(to)).filter(({ id }) => !before.has(id));
		}
	};
}

/** The first link in a mail's text whose address fits. */
export function linkIn(mail: StoredMail, fits: RegExp = /./): string {
	const links = mail.text.match(/https?:\/\/[^\s<>"')\]]+/g) ?? [];
	const found = links.find((link) => fits.test(link));
	if (found) return found;
	throw new Error(`"${mail.subject}" has no link like ${fits}; its text:\n${mail.text}`);
}

async function describeMissing(to: string, list: (to?: string) => Promise<StoredMail[]>) {
	const all = await list();
	const lines = all.map((mail) => `  ${mail.envelope.to.join(', ')}: ${mail.subject}`);
	return `No such mail to ${to} arrived. In the mailbox:\n${lines.join('\n') || '  nothing'}`;
}
