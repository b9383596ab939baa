import { and, eq, isNull, or } from 'drizzle-orm';
import type { AnswerLink } from '$lib/server/access/require-answer-link';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import {
	booking,
	lab,
	participant,
	room,
	study,
	studyPause,
	type Answer
} from '$lib/server/db/schema';
import { placeOf } from '$lib/server/invitations/visit-mail';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { visitStateOf, type VisitState } from './visit-state';

/** What a participant's link shows: their own visit and the laboratory, nothing of the study's design. */
export interface AnswerPage {
	state: VisitState;
	publicTitle: string;
	startMs: number;
	endMs: number;
	zone: string;
	answer: Answer;
	answeredAtMs: number | null;
	note: string;
	place: string;
	directions: string;
	lab: { name: string; zone: string; phone: string; email: string };
	/** They asked to stop and wait for the laboratory. */
	isStopping: boolean;
	/** The whole study pauses: whether the visit takes place is not certain. */
	isStudyPaused: boolean;
	nowMs: number;
}

/** Reads only: mail scanners open links, and that must change nothing. */
export async function loadAnswerPage(
	db: Database,
	clock: Clock,
	setting: MailSetting,
	link: AnswerLink
): Promise<AnswerPage> {
	const [row] = await db
		.select({ booking, participant, study, lab, room })
		.from(booking)
		.innerJoin(participant, eq(participant.id, booking.participantId))
		.innerJoin(study, eq(study.id, booking.studyId))
		.innerJoin(lab, eq(lab.id, study.labId))
		.innerJoin(room, eq(room.id, booking.roomId))
		.where(eq(booking.id, link.bookingId));
	if (!row) throw new RangeError('A link stands for a booking that exists');
	const state = visitStateOf(row, link, clock.now());
	const isShown = state === 'open' || state === 'begun';
	return {
		state,
		publicTitle: row.study.publicTitle,
		startMs: row.booking.during.startsAt.getTime(),
		endMs: row.booking.during.endsAt.getTime(),
		zone: row.participant.zone,
		answer: isShown ? row.booking.answer : 'none',
		answeredAtMs: isShown ? (row.booking.answeredAt?.getTime() ?? null) : null,
		note: isShown ? await readNote(setting, link, row.booking.answerNote) : '',
		place: placeOf({ lab: row.lab, room: row.room }),
		directions: row.room.directions,
		lab: {
			name: row.lab.name,
			zone: row.lab.zone,
			phone: row.study.phone || row.lab.phone,
			email: setting.fromAddress
		},
		...(await findPauses(db, link)),
		nowMs: clock.now()
	};
}

async function readNote(
	setting: MailSetting,
	link: AnswerLink,
	sealed: Uint8Array | null
): Promise<string> {
	if (!sealed) return '';
	const opened = await setting.keys.readText(link.participantId, sealed);
	return opened.ok ? opened.text : '';
}

async function findPauses(db: Database, link: AnswerLink) {
	const rows = await db
		.select({ participantId: studyPause.participantId, pausedBy: studyPause.pausedBy })
		.from(studyPause)
		.where(
			and(
				eq(studyPause.studyId, link.studyId),
				isNull(studyPause.liftedAt),
				or(isNull(studyPause.participantId), eq(studyPause.participantId, link.participantId))
			)
		);
	return {
		isStopping: rows.some((row) => row.participantId !== null && row.pausedBy === null),
		isStudyPaused: rows.some((row) => row.participantId === null)
	};
}
