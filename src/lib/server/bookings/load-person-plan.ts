import { eq } from 'drizzle-orm';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { protocolVersion, study } from '$lib/server/db/schema';
import { loadParticipant, type StudyParticipant } from '$lib/server/people/load-participants';
import type {
	BookingProblem,
	ChainPlan,
	GapRule,
	PlacedVisit,
	Weekday
} from '$scheduler/booking/types.ts';
import { loadLabCalendar, type NamedCalendar } from './load-lab-calendar';
import { isLive, loadVisits, type StudyVisit } from './load-visits';

/** One person's chain and everything it is judged by. */
export type PersonPlan = {
	participant: StudyParticipant;
	content: ProtocolContent;
	lab: NamedCalendar;
	problem: BookingProblem;
	/** Every booking, whatever became of it. */
	visits: StudyVisit[];
	/** The live ones as the engine reads them; visits that are over are fixed. */
	chain: PlacedVisit[];
	/** To be handed back when something is saved. */
	planVersion: number;
};

const dayMs = 24 * 3_600_000;

/** Loads a participant's plan; null when the grant's study has no such participant. */
export async function loadPersonPlan(
	db: Queryable,
	clock: Clock,
	grant: Grant<'booking:read' | 'booking:change' | 'today:read'>,
	participantId: string
): Promise<PersonPlan | null> {
	const participant = await loadParticipant(db, grant, participantId);
	if (!participant) return null;
	const content = await loadContent(db, participant.protocolVersionId);
	const planVersion = await loadPlanVersion(db, grant.studyId);
	const visits = await loadVisits(db, grant, { participantId });
	const nowMs = clock.now();
	const lab = await loadLabCalendar(db, {
		labId: grant.labId,
		fromMs: nowMs - dayMs,
		exceptParticipantId: participantId
	});
	const problem = toProblem({ participant, content, lab, nowMs });
	return { participant, content, lab, problem, visits, chain: toChain(visits, nowMs), planVersion };
}

export async function loadPlanVersion(db: Queryable, studyId: string): Promise<number> {
	const [row] = await db
		.select({ planVersion: study.planVersion })
		.from(study)
		.where(eq(study.id, studyId));
	return row?.planVersion ?? 0;
}

export async function loadContent(db: Queryable, versionId: string): Promise<ProtocolContent> {
	const [row] = await db
		.select({ content: protocolVersion.content })
		.from(protocolVersion)
		.where(eq(protocolVersion.id, versionId));
	if (!row) throw new Error('a participant belongs to a protocol version');
	return row.content;
}

type ProblemParts = {
	participant: StudyParticipant;
	content: ProtocolContent;
	lab: NamedCalendar;
	nowMs: number;
};

export function toProblem({ participant, content, lab, nowMs }: ProblemParts): BookingProblem {
	return {
		plan: toChainPlan(content),
		calendar: lab.calendar,
		participant: {
			zone: participant.zone,
			availability:
				participant.availability.length === 0
					? null
					: participant.availability.map((window) => ({
							...window,
							weekday: window.weekday as Weekday
						})),
			busy: [],
			earliestStartMs: participant.earliestStartAtMs
		},
		nowMs
	};
}

/** What the protocol says about visits; the same in every arm. Longer pauses may lie between practice days. */
export function toChainPlan({ visits, booking }: ProtocolContent): ChainPlan {
	const hoursMean: GapRule['hoursMean'] = booking.dayMeaning === 'clock-time' ? 'clock' : 'elapsed';
	return {
		visits: visits.map(
			({ number, label, kind, minutes, setupMinutes, cleanupMinutes, gapBefore }) => {
				const allowedPauses =
					kind === 'practice' ? booking.pauses : { ...booking.pauses, count: 0 };
				const gap = gapBefore && { ...gapBefore, allowedPauses, hoursMean };
				return { number, label, kind, minutes, setupMinutes, cleanupMinutes, gapBefore: gap };
			}
		),
		clockWindow: {
			earliestMinute: booking.earliestMinute,
			latestMinute: booking.latestMinute,
			sameTimeToleranceMinutes: booking.sameTimeToleranceMinutes
		},
		weekdays: booking.weekdays as Weekday[]
	};
}

/** The live visits in the plan's order; what is over, or has begun, stays where it is. */
export function toChain(visits: readonly StudyVisit[], nowMs: number): PlacedVisit[] {
	return visits
		.filter(isLive)
		.map(({ visitNumber, startMs, rigId, staffId, state }) => {
			const fixed = state === 'attended' || startMs <= nowMs;
			return { visitNumber, startMs, rigId, staffId, ...(fixed ? { fixed } : {}) };
		})
		.sort((a, b) => a.visitNumber - b.visitNumber);
}
