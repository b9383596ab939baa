import type { ToldWay } from '$lib/bookings/told-way';
import { formatDayTime } from '$lib/time/format-instant';
import { formatHours, formatLength } from '$scheduler/booking/booking-words.ts';
import type { Alternative } from '$scheduler/booking/find-alternatives.ts';
import type { PlacedVisit } from '$scheduler/booking/types.ts';
import type { MovableVisit } from './judge-visit';
import { isLive } from './load-visits';

const minuteMs = 60_000;

/** A way to move a visit in words: what moves, what is sent, how far, and the hours around it. */
export function tellWay(movable: MovableVisit, way: Alternative): ToldWay {
	const { plan, visit, chain } = movable;
	const changed = way.visits.filter((one) => !one.fixed && isChanged(one, chain));
	const at = way.visits.find(({ visitNumber }) => visitNumber === visit.visitNumber);
	if (!at) throw new RangeError('a way holds the visit that it moves');
	const mailCount = countMails(movable, changed);
	const sentences = [
		visit.state === 'no-show'
			? makeUpText(way.moved.length)
			: `${countText(way.moved.length, 'Moves 1 visit', 'visits')}, ${sendText(mailCount)}.`,
		`${shiftText(visit.startMs, at.startMs)}${gapText(way, visit.visitNumber)}.`,
		...othersText(movable, way),
		...(at.rigId === visit.rigId ? [] : ['Another rig.']),
		...spareText(way.spareMinutes)
	];
	return {
		places: changed.map(({ visitNumber, startMs, rigId, staffId }) => {
			return { visitNumber, startMs, rigId, staffId };
		}),
		startMs: at.startMs,
		rigId: at.rigId,
		rigName: plan.lab.rigs.find(({ id }) => id === at.rigId)?.name ?? '',
		movedCount: way.moved.length,
		mailCount,
		text: sentences.join(' ')
	};
}

function isChanged(visit: PlacedVisit, chain: readonly PlacedVisit[]): boolean {
	const now = chain.find(({ visitNumber }) => visitNumber === visit.visitNumber);
	return (
		!now ||
		now.startMs !== visit.startMs ||
		now.rigId !== visit.rigId ||
		now.staffId !== visit.staffId
	);
}

/** Visits that were told and get another time or room. */
function countMails({ plan }: MovableVisit, changed: readonly PlacedVisit[]): number {
	const roomOf = (rigId: string) => plan.lab.rigs.find(({ id }) => id === rigId)?.roomId;
	return changed.filter((one) => {
		const now = plan.visits.find((visit) => visit.visitNumber === one.visitNumber && isLive(visit));
		if (!now || now.invitedAtMs === null) return false;
		return now.startMs !== one.startMs || roomOf(now.rigId) !== roomOf(one.rigId);
	}).length;
}

function countText(count: number, one: string, many: string): string {
	return count === 1 ? one : `Moves ${count} ${many}`;
}

/** A missed visit is booked anew; its invitation is no update. */
function makeUpText(movedCount: number): string {
	const others = movedCount - 1;
	if (others === 0) return 'Books it again, moves no other visit.';
	return `Books it again and moves ${others === 1 ? '1 other visit' : `${others} other visits`}.`;
}

function sendText(mailCount: number): string {
	if (mailCount === 0) return 'sends no update';
	return mailCount === 1 ? 'sends 1 update' : `sends ${mailCount} updates`;
}

function shiftText(fromMs: number, toMs: number): string {
	const minutes = Math.round(Math.abs(toMs - fromMs) / minuteMs);
	const side = toMs < fromMs ? 'earlier' : 'later';
	const days = Math.floor(minutes / 1440);
	const length =
		days > 0
			? `${days === 1 ? '1 day' : `${days} days`}${minutes % 1440 === 0 ? '' : ` ${formatLength(minutes % 1440)}`}`
			: formatLength(minutes);
	return `${length} ${side}`;
}

/** The hours before and after the moved visit. */
function gapText(way: Alternative, visitNumber: number): string {
	const index = way.visits.findIndex((visit) => visit.visitNumber === visitNumber);
	const gaps = [way.gapHours[index], way.gapHours[index + 1]].filter(
		(hours) => typeof hours === 'number'
	);
	if (gaps.length === 0) return '';
	const words = gaps.map((hours) => `${formatHours(hours)} h`).join(' and ');
	return `; ${gaps.length === 1 ? 'gap' : 'gaps'} ${words}`;
}

function othersText({ plan, visit }: MovableVisit, way: Alternative): string[] {
	const { zone } = plan.problem.calendar;
	return way.moved
		.filter(({ visitNumber }) => visitNumber !== visit.visitNumber)
		.map(({ visitNumber, toMs }) => {
			const planned = plan.problem.plan.visits.find(({ number }) => number === visitNumber);
			return `${planned?.label ?? `Visit ${visitNumber}`} goes to ${formatDayTime(toMs, zone)}.`;
		});
}

function spareText(spareMinutes: number | null): string[] {
	if (spareMinutes === null || spareMinutes > 60) return [];
	return [`Only ${formatLength(spareMinutes)} to spare before a gap breaks.`];
}
