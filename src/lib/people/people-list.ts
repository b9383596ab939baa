import { z } from 'zod';

const timelineSchema = z.object({
	steps: z.array(z.string()),
	at: z.number().int(),
	hasLeft: z.boolean(),
	words: z.string()
});

/** One line of the list of people: by code, without arm, name or address. */
export const personRowSchema = z.object({
	id: z.string(),
	code: z.string(),
	timeline: timelineSchema,
	nextVisit: z
		.object({
			bookingId: z.string(),
			label: z.string(),
			startMs: z.number(),
			rigName: z.string(),
			isHere: z.boolean(),
			answer: z.enum(['none', 'accepted', 'declined', 'asks-other-time']),
			isInvited: z.boolean()
		})
		.nullable(),
	consent: z.string().nullable(),
	isConsentOld: z.boolean(),
	waits: z
		.object({ words: z.string(), tone: z.enum(['rose', 'amber', 'plain']), href: z.string() })
		.nullable(),
	consentToVisitDays: z.number().int().nullable(),
	mayConsent: z.boolean(),
	mayBook: z.boolean()
});
export type PersonRow = z.infer<typeof personRowSchema>;

export const peopleListSchema = z.object({
	zone: z.string(),
	rows: z.array(personRowSchema),
	nowMs: z.number()
});
export type PeopleList = z.infer<typeof peopleListSchema>;

export const peopleViews = ['coming', 'waiting', 'no-answer', 'all'] as const;
export type PeopleView = (typeof peopleViews)[number];

export const viewLabels: Record<PeopleView, string> = {
	coming: 'Coming up',
	waiting: 'Waits for me',
	'no-answer': 'No answer yet',
	all: 'All'
};

const comingMs = 7 * 24 * 3_600_000;

/** Whether a person belongs to a view. */
export function isInView(row: PersonRow, view: PeopleView, nowMs: number): boolean {
	const { nextVisit } = row;
	if (view === 'coming') return nextVisit !== null && nextVisit.startMs <= nowMs + comingMs;
	if (view === 'waiting') return row.waits !== null;
	if (view === 'no-answer') {
		return nextVisit !== null && nextVisit.isInvited && nextVisit.answer === 'none';
	}
	return true;
}

/** Whether what was typed is part of the code: "17" finds TW-017. */
export function matchesCode(row: PersonRow, typed: string): boolean {
	return row.code.toLowerCase().includes(typed.trim().toLowerCase());
}

/** The middle of some numbers, and the largest; null for none. */
export function summariseDays(days: readonly number[]): { median: number; longest: number } | null {
	const sorted = [...days].sort((a, b) => a - b);
	const longest = sorted.at(-1);
	const upper = sorted[Math.floor(sorted.length / 2)];
	const lower = sorted[Math.floor((sorted.length - 1) / 2)];
	if (longest === undefined || upper === undefined || lower === undefined) return null;
	return { median: (lower + upper) / 2, longest };
}
