import { z } from 'zod';
import { waitingWords, type WaitingKind } from './waiting-item';

export const waitingItemSchema = z.object({
	key: z.string(),
	kind: z.enum(Object.keys(waitingWords) as [WaitingKind, ...WaitingKind[]]),
	participantId: z.string().nullable(),
	bookingId: z.string().nullish(),
	tone: z.enum(['rose', 'amber', 'plain']),
	title: z.string(),
	what: z.string(),
	ifNothing: z.string(),
	byMs: z.number().nullable(),
	byText: z.string().nullable(),
	act: z.object({ label: z.string(), href: z.string() }).nullable()
});

/** Today's visits of the study by rig, for those who book. */
export const dayPictureSchema = z.object({
	rigs: z.array(z.string()),
	visits: z.array(
		z.object({
			bookingId: z.string(),
			participantId: z.string(),
			code: z.string(),
			label: z.string(),
			rigName: z.string(),
			startMs: z.number(),
			endMs: z.number(),
			occupiedFromMs: z.number(),
			occupiedToMs: z.number(),
			state: z.enum(['booked', 'attended', 'no-show'])
		})
	)
});
export type DayPicture = z.infer<typeof dayPictureSchema>;

/** What changes on the first page while it is open. */
export const todaySchema = z.object({
	zone: z.string(),
	nowMs: z.number(),
	items: z.array(waitingItemSchema),
	day: dayPictureSchema.nullable()
});
export type Today = z.infer<typeof todaySchema>;
