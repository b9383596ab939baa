import { z } from 'zod';

const blockSchema = z.object({
	number: z.number(),
	state: z.enum(['scored', 'ready', 'not-yet', 'no-file']),
	readyAtMs: z.number().nullable()
});
const visitSchema = z.object({
	bookingId: z.string(),
	code: z.string(),
	firstName: z.string().nullable(),
	visitNumber: z.number(),
	label: z.string(),
	startsAtMs: z.number(),
	endsAtMs: z.number(),
	rig: z.string(),
	room: z.string(),
	staff: z.string(),
	state: z.enum(['booked', 'attended']),
	blocks: z.array(blockSchema)
});
export const boardSchema = z.object({ zone: z.string(), visits: z.array(visitSchema) });
export type Board = z.infer<typeof boardSchema>;

const everyMs = 5_000;

/** Looks at the board every few seconds while the page is open; says when it could not. */
export function watchBoard(address: () => string) {
	let board = $state<Board | null>(null);
	let isStale = $state(false);
	$effect(() => {
		const cancel = new AbortController();
		const look = async () => {
			try {
				const answer = await fetch(address(), { signal: cancel.signal });
				if (!answer.ok) throw new Error(String(answer.status));
				board = boardSchema.parse(await answer.json());
				isStale = false;
			} catch {
				if (!cancel.signal.aborted) isStale = true;
			}
		};
		const timer = setInterval(() => void look(), everyMs);
		return () => {
			clearInterval(timer);
			cancel.abort();
		};
	});
	return {
		get board() {
			return board;
		},
		get isStale() {
			return isStale;
		}
	};
}
