import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { startApp, type AppServer } from '../../support/app-server';
import { openBrowser, type TestBrowser } from '../../support/browser';
import type { StoredMail } from '../../support/mailbox';
import { addDays, findMonday } from '../pages/demo-clock';
import type { Desk } from '../pages/desk';
import type { HandsKind } from '../pages/hands';

export const team = {
	steward: { name: 'Sigrid Tangen', email: 'sigrid@fjordview.example' },
	investigator: { name: 'Inga Frey', email: 'inga@fjordview.example' },
	coordinator: { name: 'Cora Lind', email: 'cora@fjordview.example' },
	operator: { name: 'Otto Brandt', email: 'otto@fjordview.example' },
	statistician: { name: 'Stella Maro', email: 'stella@fjordview.example' },
	unblinded: { name: 'Umar Dahl', email: 'umar@fjordview.example' },
	approver: { name: 'Ada Petrov', email: 'ada@fjordview.example' }
};
export type Part = keyof typeof team;

/** The six simulated people, and seven more whose trials give a region as well. */
export const steady = ['Q11', 'Q23', 'Q64', 'Q12', 'Q13', 'Q14', 'Q15', 'Q16', 'Q17', 'Q18'].map(
	(code) => ({ code, like: ['Q23', 'Q64'].includes(code) ? code : 'Q11' })
);
export const others = ['Q37', 'Q42', 'Q58'].map((code) => ({ code, like: code }));
export const everybody = [...steady, ...others];
/** Whoever declines, and whoever is cancelled: neither is measured. */
export const unsure = 'Q99';
export const cancelled = 'Q98';
export const addressOf = (code: string) => `${code.toLowerCase()}@people.example`;
export const newcomer = (code: string) => ({
	name: `Invented ${code}`,
	email: addressOf(code),
	code
});

export const monday = findMonday(Date.now());
/** When every baseline visit is over; the first day of practice is Thursday. */
export const tuesdayEvening = `${addDays(monday, 1)}T18:00`;
export const wednesday = addDays(monday, 2);
export const thursday = addDays(monday, 3);

/** The people at their desks; each sits down in the first step that is theirs. */
export const desks = {} as Record<Part, Desk>;

/** What the steps leave for later ones. */
export const journey = {} as {
	app: AppServer;
	browser: TestBrowser;
	/** How everybody works their pages. */
	hands: HandsKind;
	/** For files that somebody saves. */
	folder: string;
	/** Addresses of the lab's and the study's first page. */
	lab: string;
	study: string;
	/** People whose decision waits for the approver. */
	held: string[];
};

export async function beginJourney(hands: HandsKind): Promise<void> {
	journey.hands = hands;
	journey.folder = mkdtempSync(join(tmpdir(), 'ovalry-journey-'));
	[journey.app, journey.browser] = await Promise.all([startApp('rehearsal'), openBrowser()]);
}

export async function endJourney(): Promise<void> {
	await journey.browser?.close();
	await journey.app?.stop();
	rmSync(journey.folder, { recursive: true, force: true });
}

export const eventOf = (mail: StoredMail | undefined) => mail?.calendar?.events[0];
export const isAbout = (start: string) => (mail: StoredMail) => mail.subject.startsWith(start);
