import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { describeBrokenRule } from '$scheduler/booking/describe-broken-rule.ts';
import { findAlternatives, type Alternative } from '$scheduler/booking/find-alternatives.ts';
import { judgeStarts, type JudgedStart } from '$scheduler/booking/judge-starts.ts';
import type { Interval, PlacedVisit } from '$scheduler/booking/types.ts';
import { loadPersonPlan, type PersonPlan } from './load-person-plan';
import { isLive, loadVisits, type StudyVisit } from './load-visits';
import { placeVisits } from './place-visits';
import { hasOpenRequest } from './settle-request';
import {
	describeContext,
	findNewBreaks,
	tellBrokenRules,
	type ToldRule
} from './tell-broken-rules';

const horizonMs = 12 * 7 * 24 * 3_600_000;

/** A visit that may be moved, or a missed one that may be made up for. */
export type MovableVisit = { plan: PersonPlan; visit: StudyVisit; chain: PlacedVisit[] };
export type MovableAnswer =
	({ ok: true } & MovableVisit) | { ok: false; reason: 'not-found' | 'over' | 'withdrawn' };

/**
 * Loads a booking as something to be moved. A missed visit counts as standing where it was, so that
 * its make-up is a move too.
 */
export async function loadMovable(
	db: Queryable,
	clock: Clock,
	grant: Grant<'booking:read' | 'booking:change' | 'today:read'>,
	{ bookingId }: { bookingId: string }
): Promise<MovableAnswer> {
	const [visit] = await loadVisits(db, grant, { bookingIds: [bookingId] });
	if (!visit || visit.state === 'cancelled') return { ok: false, reason: 'not-found' };
	const plan = await loadPersonPlan(db, clock, grant, visit.participantId);
	if (!plan) return { ok: false, reason: 'not-found' };
	if (plan.participant.withdrawnAtMs !== null) return { ok: false, reason: 'withdrawn' };
	const isMakeUp = visit.state === 'no-show' && !hasLive(plan, visit.visitNumber);
	const isComing = visit.state === 'booked' && visit.startMs > clock.now();
	if (!isMakeUp && !isComing) return { ok: false, reason: 'over' };
	const { visitNumber, startMs, rigId, staffId } = visit;
	const missed = { visitNumber, startMs, rigId, staffId };
	const chain = isMakeUp ? [...plan.chain, missed].sort(byNumber) : plan.chain;
	return { ok: true, plan, visit, chain };
}

function hasLive({ visits }: PersonPlan, visitNumber: number): boolean {
	return visits.some((one) => one.visitNumber === visitNumber && isLive(one));
}

function byNumber(a: PlacedVisit, b: PlacedVisit): number {
	return a.visitNumber - b.visitNumber;
}

/** A stretch of starts on one rig with one verdict: allowed, or the first rule they break. */
export type JudgedStretch = {
	rigId: string;
	fromMs: number;
	/** The last start of the stretch, included. */
	toMs: number;
	/** Null where the visit may start. */
	refusedBy: string | null;
};

/** Where in a window a visit may start while the person's other visits stay, and why not elsewhere. */
export function judgeWindow(
	{ plan, visit, chain }: MovableVisit,
	window: Interval
): JudgedStretch[] {
	const options = { problem: plan.problem, chain, visitNumber: visit.visitNumber, window };
	const context = describeContext(plan);
	const short = (start: JudgedStart): string | null => {
		const { verdict } = start;
		if (!verdict.ok) return describeBrokenRule(verdict.broken, context).short;
		const broken = judgePlace({ plan, visit, chain }, start.startMs ?? 0, start.rigId)[0];
		return broken?.short ?? null;
	};
	return joinStretches(judgeStarts(options).map((start) => ({ start, refusedBy: short(start) })));
}

function joinStretches(
	judged: readonly { start: JudgedStart; refusedBy: string | null }[]
): JudgedStretch[] {
	const quarterMs = 15 * 60_000;
	const stretches: JudgedStretch[] = [];
	for (const { start, refusedBy } of judged) {
		const { rigId, startMs } = start;
		if (startMs === null) continue;
		const last = stretches.at(-1);
		const follows = last?.rigId === rigId && last.toMs + quarterMs === startMs;
		if (last && follows && last.refusedBy === refusedBy) last.toMs = startMs;
		else stretches.push({ rigId, fromMs: startMs, toMs: startMs, refusedBy });
	}
	return stretches;
}

/** Every rule that breaks when the visit goes to one place and all others stay; none: it may go. */
export function judgePlace(
	{ plan, visit }: MovableVisit,
	startMs: number,
	rigId: string
): ToldRule[] {
	const changed = placeVisits(plan, [{ visitNumber: visit.visitNumber, startMs, rigId }]);
	return tellBrokenRules(plan, findNewBreaks(plan, changed));
}

/**
 * Up to three ways to move the visit that keep every rule, fewest moved visits first, then nearest
 * to where it was wanted; none starts before `nowMs`.
 */
export function findWays(
	{ plan, visit, chain }: MovableVisit,
	{ nowMs, wantedStartMs }: { nowMs: number; wantedStartMs?: number | undefined }
): Alternative[] {
	// Who declined, or asks for another time, cannot come while the visit is booked now.
	const busy = hasOpenRequest(visit) ? [{ fromMs: visit.startMs, toMs: visit.endMs }] : [];
	const participant = { ...plan.problem.participant, busy };
	const found = findAlternatives({
		problem: { ...plan.problem, participant, nowMs },
		chain,
		visitNumber: visit.visitNumber,
		horizonEndMs: nowMs + horizonMs,
		...(wantedStartMs === undefined ? {} : { wantedStartMs })
	});
	return found.ok ? found.alternatives : [];
}
