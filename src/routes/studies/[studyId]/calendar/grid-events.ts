import { toGridTime } from '$lib/bookings/grid-clock';
import type { JudgedWeek, Week, WeekVisit } from '$lib/bookings/week';
import { formatShortDay, formatTime } from '$lib/time/format-instant';
import { zoneCity } from '$lib/time/zone-label';
import { answerWords, stateWords } from '$lib/bookings/visit-words';
import type { Place } from './move-visit.svelte';

/** What the grid draws; `id` names everything that is seen, so that unchanged events stay as they are. */
export type GridEvent = {
	id: string;
	start: string;
	end: string;
	display: 'auto' | 'background';
	editable: boolean;
	classNames: string[];
	extendedProps: GridProps;
};
export type GridProps = {
	kind: 'visit' | 'candidate' | 'refused' | 'allowed' | 'closed';
	rigId: string;
	bookingId: string | null;
	title: string;
	detail: string;
	/** Read out. */
	words: string;
	/** Shares of the height that set-up and clean-up take. */
	setupShare: number;
	cleanupShare: number;
	/** First start of an allowed stretch, for a click. */
	fromMs: number;
};

export type Moving = {
	judged: JudgedWeek | null;
	candidate: Place | null;
	isRefused: boolean;
};

const minuteMs = 60_000;

/** Everything on the grid: closed times, places judged, visits, and the place that is tried. */
export function listGridEvents(week: Week, moving: Moving): GridEvent[] {
	const { judged } = moving;
	return [
		...(judged ? judgedEvents(week, judged) : closedEvents(week)),
		...week.visits.map((visit) => visitEvent(week, visit, moving)),
		...candidateEvents(week, moving)
	];
}

function closedEvents(week: Week): GridEvent[] {
	return week.closedTimes.map(({ rigId, fromMs, toMs }) =>
		background(week, { kind: 'closed', rigId, fromMs, toMs, title: '', detail: '' })
	);
}

function judgedEvents(week: Week, judged: JudgedWeek): GridEvent[] {
	const isElsewhere = judged.personZone !== week.zone;
	return judged.stretches.map(({ rigId, fromMs, toMs, refusedBy }) => {
		const endMs = toMs + 15 * minuteMs;
		if (refusedBy !== null) {
			const title = endMs - fromMs >= 45 * minuteMs ? refusedBy : '';
			return background(week, { kind: 'refused', rigId, fromMs, toMs: endMs, title, detail: '' });
		}
		const title = spanText(fromMs, toMs, week.zone);
		const detail = isElsewhere
			? `${zoneCity(judged.personZone)} ${spanText(fromMs, toMs, judged.personZone)}`
			: '';
		const lastEndMs = toMs + judged.minutes * minuteMs;
		return background(week, { kind: 'allowed', rigId, fromMs, toMs: lastEndMs, title, detail });
	});
}

function spanText(fromMs: number, toMs: number, zone: string): string {
	const from = formatTime(fromMs, zone);
	return fromMs === toMs ? from : `${from}–${formatTime(toMs, zone)}`;
}

type Stretch = Pick<GridProps, 'kind' | 'rigId' | 'title' | 'detail' | 'fromMs'> & { toMs: number };

function background(week: Week, stretch: Stretch): GridEvent {
	const { kind, rigId, fromMs, toMs, title, detail } = stretch;
	const props = { kind, rigId, title, detail, fromMs, bookingId: null, words: '' };
	return {
		id: `${kind} ${rigId} ${fromMs} ${toMs} ${title} ${detail}`,
		start: toGridTime(fromMs, week.zone),
		end: toGridTime(toMs, week.zone),
		display: 'background',
		editable: false,
		classNames: [`is-${kind}`],
		extendedProps: { ...props, setupShare: 0, cleanupShare: 0 }
	};
}

function visitEvent(week: Week, visit: WeekVisit, { judged, candidate }: Moving): GridEvent {
	const isMoved = visit.bookingId === judged?.bookingId;
	const isChain = judged !== null && visit.participantId === judged.participantId;
	const classNames = [
		'is-visit',
		visit.code === null ? 'is-other' : `is-${visit.state}`,
		...(isChain ? ['is-chain'] : []),
		...(isMoved && candidate ? ['is-left'] : []),
		...(visit.answer === 'declined' || visit.answer === 'asks-other-time' ? ['is-asking'] : [])
	];
	const time = formatTime(visit.startMs, week.zone);
	const detail = isMoved && candidate ? `now ${time}` : detailOf(visit);
	const props = {
		kind: 'visit' as const,
		rigId: visit.rigId,
		bookingId: visit.code === null ? null : visit.bookingId,
		title: visit.code ?? 'taken',
		detail,
		words: wordsOf(week, visit, detail),
		fromMs: visit.startMs,
		...sharesOf(visit)
	};
	return {
		id: JSON.stringify([visit.bookingId, visit.startMs, props, classNames]),
		start: toGridTime(visit.occupiedFromMs, week.zone),
		end: toGridTime(visit.occupiedToMs, week.zone),
		display: 'auto',
		editable: visit.mayMove,
		classNames,
		extendedProps: props
	};
}

function detailOf(visit: WeekVisit): string {
	if (visit.state !== 'booked') return stateWords[visit.state];
	if (visit.answer === 'declined') return 'declined';
	return visit.answer === 'asks-other-time' ? 'asks other time' : '';
}

function sharesOf(visit: WeekVisit): { setupShare: number; cleanupShare: number } {
	const wholeMs = visit.occupiedToMs - visit.occupiedFromMs;
	return {
		setupShare: (visit.startMs - visit.occupiedFromMs) / wholeMs,
		cleanupShare: (visit.occupiedToMs - visit.endMs) / wholeMs
	};
}

/** Begins with what is seen, so that who speaks to the page can name what they see. */
function wordsOf(week: Week, visit: WeekVisit, detail: string): string {
	const from = `${formatShortDay(visit.startMs, week.zone)}, ${formatTime(visit.startMs, week.zone)}`;
	const to = formatTime(visit.endMs, week.zone);
	if (visit.code === null) return `taken, by another study, ${from} to ${to}`;
	const state =
		visit.state === 'booked'
			? answerWords({ answer: visit.answer, invitedAtMs: visit.isInvited ? 0 : null })
			: stateWords[visit.state];
	const seen = [visit.code, detail].filter(Boolean).join(' ');
	return `${seen}, ${visit.label}, ${from} to ${to} on ${visit.rigName}, ${state}`;
}

function candidateEvents(week: Week, { judged, candidate, isRefused }: Moving): GridEvent[] {
	if (!judged || !candidate) return [];
	const endMs = candidate.startMs + judged.minutes * minuteMs;
	const time = formatTime(candidate.startMs, week.zone);
	const title = judged.code;
	const detail = isRefused ? `not ${time}` : `to ${time}`;
	const words = `${title} ${detail}, ${judged.label}`;
	const { rigId } = candidate;
	const props = { kind: 'candidate' as const, rigId, bookingId: null, title, detail, words };
	return [
		{
			id: `candidate ${rigId} ${candidate.startMs} ${isRefused}`,
			start: toGridTime(candidate.startMs, week.zone),
			end: toGridTime(endMs, week.zone),
			display: 'auto',
			editable: false,
			classNames: ['is-candidate', isRefused ? 'is-impossible' : 'is-possible'],
			extendedProps: { ...props, fromMs: candidate.startMs, setupShare: 0, cleanupShare: 0 }
		}
	];
}
