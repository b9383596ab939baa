import type { z } from 'zod';
import { fetchJson, postJson } from '$lib/fetch/fetch-json';
import type { ToldWay } from '$lib/bookings/told-way';
import {
	movableReplySchema,
	moveReplySchema,
	placeReplySchema,
	type JudgedWeek,
	type PlaceReply,
	type Week
} from '$lib/bookings/week';

export type Place = { startMs: number; rigId: string };
type Trouble = { title: string; sentences: string[] };

const quarterMs = 15 * 60_000;

/**
 * Moving one visit: which places the server allows in the shown week, the place that is tried now,
 * what the server says to it, and the saving. It holds no rule of its own.
 */
export class VisitMove {
	judged = $state.raw<JudgedWeek | null>(null);
	candidate = $state.raw<Place | null>(null);
	verdict = $state.raw<PlaceReply | null>(null);
	wayIndex = $state(0);
	trouble = $state.raw<Trouble | null>(null);
	isLoading = $state(false);
	isSaving = $state(false);
	#asked: AbortController | undefined;

	constructor(
		private readonly base: string,
		private readonly onsaved: (words: string) => void
	) {}

	get isMoving(): boolean {
		return this.judged !== null || this.isLoading;
	}

	/** Starts of the shown week where the visit may go, in order of time. */
	get allowed(): Place[] {
		return (this.judged?.stretches ?? [])
			.filter(({ refusedBy }) => refusedBy === null)
			.flatMap(({ rigId, fromMs, toMs }) => {
				const count = (toMs - fromMs) / quarterMs + 1;
				return Array.from({ length: count }, (_, index) => {
					return { rigId, startMs: fromMs + index * quarterMs };
				});
			})
			.filter((place) => !this.isWhereItIs(place))
			.sort((a, b) => a.startMs - b.startMs || a.rigId.localeCompare(b.rigId));
	}

	get way(): ToldWay | null {
		return this.verdict?.ways[this.wayIndex] ?? null;
	}

	get isRefused(): boolean {
		return (this.verdict?.broken.length ?? 0) > 0;
	}

	private isWhereItIs({ startMs }: Place): boolean {
		const { judged } = this;
		const now = judged?.chain.find(({ visitNumber }) => visitNumber === judged.visitNumber);
		return now?.startMs === startMs;
	}

	/** Asks where the visit may go in the shown week. */
	async begin(bookingId: string, week: Week): Promise<void> {
		this.#asked?.abort();
		const asked = (this.#asked = new AbortController());
		this.isLoading = true;
		this.trouble = null;
		const query = new URLSearchParams({
			bookingId,
			date: week.monday,
			fromMinute: String(week.fromMinute),
			toMinute: String(week.toMinute)
		});
		const address = `${this.base}/judge?${query}`;
		const answer = await fetchJson(address, movableReplySchema, { signal: asked.signal }).catch(
			() => null
		);
		if (!answer || asked.signal.aborted) return;
		this.isLoading = false;
		this.accept(answer.ok ? answer.value : null);
	}

	private accept(reply: z.output<typeof movableReplySchema> | null): void {
		if (reply?.ok) this.judged = reply.judged;
		else if (reply) this.trouble = { title: reply.title, sentences: [reply.text] };
		else this.trouble = noAnswer;
	}

	/** Goes to the next allowed place of the week, or the one before; false at either end. */
	step(by: 1 | -1): boolean {
		const { allowed, candidate } = this;
		const now = this.judged?.chain.find(
			({ visitNumber }) => visitNumber === this.judged?.visitNumber
		);
		const from = candidate?.startMs ?? now?.startMs ?? 0;
		const index = candidate
			? allowed.findIndex((one) => one.startMs === from && one.rigId === candidate.rigId)
			: -1;
		const next =
			index >= 0
				? allowed[index + by]
				: by > 0
					? allowed.find(({ startMs }) => startMs > from)
					: allowed.findLast(({ startMs }) => startMs < from);
		if (next) this.try(next);
		return next !== undefined;
	}

	/** Takes an allowed place as the one to be booked; nothing is asked, the server allowed it. */
	try(place: Place): void {
		this.candidate = place;
		this.verdict = { broken: [], ways: [] };
		this.trouble = null;
	}

	/** Asks the server about a place somebody dropped the visit on. */
	async drop(bookingId: string, place: Place): Promise<void> {
		this.candidate = place;
		this.verdict = null;
		this.trouble = null;
		this.wayIndex = 0;
		const body = { bookingId, ...place };
		const answer = await postJson(`${this.base}/judge`, body, placeReplySchema);
		if (this.candidate !== place) return;
		if (answer.ok) this.verdict = answer.value;
		else this.trouble = noAnswer;
	}

	/** Saves the place that is tried, or the chosen way instead of a refused place. */
	async save(): Promise<void> {
		const { judged, candidate, way, isRefused } = this;
		if (!judged || this.isSaving || (isRefused && !way) || (!candidate && !way)) return;
		const places = isRefused
			? (way?.places ?? [])
			: [{ visitNumber: judged.visitNumber, ...candidate }];
		this.isSaving = true;
		const { participantId, planVersion } = judged;
		const body = { participantId, planVersion, places };
		const answer = await postJson(`${this.base}/move`, body, moveReplySchema);
		this.isSaving = false;
		if (!answer.ok) this.trouble = noAnswer;
		else if (!answer.value.ok) this.trouble = answer.value;
		else {
			const { mailCount } = answer.value;
			const sent =
				mailCount === 0
					? 'Nothing is sent.'
					: mailCount === 1
						? 'One mail is sent.'
						: `${mailCount} mails are sent.`;
			this.onsaved(`${judged.code}, ${judged.label} is moved. ${sent}`);
			this.end();
		}
	}

	/** Puts the visit back: nothing was changed. */
	end(): void {
		this.#asked?.abort();
		this.judged = null;
		this.candidate = null;
		this.verdict = null;
		this.trouble = null;
		this.isLoading = false;
		this.wayIndex = 0;
	}
}

const noAnswer = {
	title: 'No answer',
	sentences: ['The server did not answer. Nothing was changed; try again.']
};
