import { z } from 'zod';
import { placementSchema } from './placement-schema';
import { toldWaySchema } from './told-way';

/** One booking on the week's grid: by code, or another study's without any word about it. */
export const weekVisitSchema = z.object({
	bookingId: z.string(),
	participantId: z.string().nullable(),
	code: z.string().nullable(),
	visitNumber: z.number(),
	label: z.string(),
	rigId: z.string(),
	rigName: z.string(),
	roomName: z.string(),
	staffName: z.string(),
	startMs: z.number(),
	endMs: z.number(),
	occupiedFromMs: z.number(),
	occupiedToMs: z.number(),
	state: z.enum(['booked', 'attended', 'no-show', 'cancelled']),
	answer: z.enum(['none', 'accepted', 'declined', 'asks-other-time']),
	isInvited: z.boolean(),
	mayMove: z.boolean()
});
export type WeekVisit = z.infer<typeof weekVisitSchema>;

/** A week of the lab's rigs as the calendar page shows it. */
export const weekSchema = z.object({
	zone: z.string(),
	nowMs: z.number(),
	/** Monday of the week, a local date. */
	monday: z.string(),
	days: z.array(z.object({ date: z.string(), closed: z.string().nullable() })),
	rigs: z.array(z.object({ id: z.string(), name: z.string() })),
	/** Minutes of the local day that the grid shows. */
	fromMinute: z.number(),
	toMinute: z.number(),
	/** When a rig does not run: nothing can be there. */
	closedTimes: z.array(z.object({ rigId: z.string(), fromMs: z.number(), toMs: z.number() })),
	visits: z.array(weekVisitSchema),
	planVersion: z.number()
});
export type Week = z.infer<typeof weekSchema>;

/** Where a visit may go in a week, and the chain it belongs to. */
export const judgedWeekSchema = z.object({
	bookingId: z.string(),
	participantId: z.string(),
	code: z.string(),
	label: z.string(),
	visitNumber: z.number(),
	personZone: z.string(),
	isInvited: z.boolean(),
	minutes: z.number(),
	planVersion: z.number(),
	stretches: z.array(
		z.object({
			rigId: z.string(),
			fromMs: z.number(),
			toMs: z.number(),
			refusedBy: z.string().nullable()
		})
	),
	chain: z.array(
		z.object({
			visitNumber: z.number(),
			label: z.string(),
			startMs: z.number(),
			isOver: z.boolean()
		})
	)
});
export type JudgedWeek = z.infer<typeof judgedWeekSchema>;

export const movableReplySchema = z.discriminatedUnion('ok', [
	z.object({ ok: z.literal(true), judged: judgedWeekSchema }),
	z.object({ ok: z.literal(false), title: z.string(), text: z.string() })
]);

export const placeQuestionSchema = z.object({
	bookingId: z.uuid(),
	startMs: z.number().int(),
	rigId: z.uuid()
});

/** What the server says to one place: the rules it breaks, and ways that break none. */
export const placeReplySchema = z.object({
	broken: z.array(
		z.object({ rule: z.string(), visitNumber: z.number(), short: z.string(), sentence: z.string() })
	),
	ways: z.array(toldWaySchema)
});
export type PlaceReply = z.infer<typeof placeReplySchema>;

export const moveBodySchema = z.object({
	participantId: z.uuid(),
	places: z.array(placementSchema).min(1).max(40),
	planVersion: z.number().int()
});

export const moveReplySchema = z.discriminatedUnion('ok', [
	z.object({
		ok: z.literal(true),
		movedCount: z.number(),
		bookedCount: z.number(),
		mailCount: z.number()
	}),
	z.object({
		ok: z.literal(false),
		title: z.string(),
		text: z.string(),
		sentences: z.array(z.string())
	})
]);
export type MoveReply = z.infer<typeof moveReplySchema>;
