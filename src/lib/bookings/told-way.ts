import { z } from 'zod';
import { placementSchema } from './placement-schema';

/** One way to move a visit that keeps every rule, with what it costs. */
export const toldWaySchema = z.object({
	/** Every visit that changes, ready to be sent back. */
	places: z.array(placementSchema),
	startMs: z.number(),
	rigId: z.string(),
	rigName: z.string(),
	movedCount: z.number().int(),
	mailCount: z.number().int(),
	/** 'Moves 1 visit, sends 1 update. 1.5 h earlier; gaps 22.5 h and 147 h.' */
	text: z.string()
});
export type ToldWay = z.infer<typeof toldWaySchema>;

/** 'Move to Fri 19 March 09:30, send 1 update': what the button says. */
export function describeSending(mailCount: number): string {
	if (mailCount === 0) return 'send nothing';
	return mailCount === 1 ? 'send 1 update' : `send ${mailCount} updates`;
}
