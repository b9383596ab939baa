import { formatDayTime, formatShortDay, formatTime } from '$lib/time/format-instant';
import type { WaitingItem } from '$lib/waiting/waiting-item';
import { hasOpenRequest } from '$lib/server/bookings/settle-request';
import { isLive, type StudyVisit } from '$lib/server/bookings/load-visits';
import { visitLabel, type PersonRecord } from '$lib/server/people/load-person-records';
import type { Message } from './load-messages';

/** What the words of an item need beside the person. */
export type ItemContext = { studyId: string; zone: string; nowMs: number };

const dayMs = 24 * 3_600_000;

/**
 * What waits for the coordinator about one person, from what is booked, signed and answered. Pure:
 * no arm, no decision, no contact data can reach it.
 */
export function listPersonItems(
	record: PersonRecord,
	{ failedMails }: { failedMails: readonly Message[] },
	context: ItemContext
): WaitingItem[] {
	if (record.person.withdrawnAtMs !== null || record.person.completedAtMs !== null) return [];
	return [
		...record.visits.flatMap((visit) => visitItems(record, visit, context)),
		...consentItems(record, context),
		...bookingItems(record, context),
		...mailItems(record, failedMails, context)
	];
}

function visitItems(record: PersonRecord, visit: StudyVisit, context: ItemContext): WaitingItem[] {
	if (visit.state === 'no-show') return missedItems(record, visit, context);
	if (visit.state !== 'booked') return [];
	if (visit.endMs <= context.nowMs) return [attendanceItem(record, visit, context)];
	return hasOpenRequest(visit) ? [requestItem(record, visit, context)] : [];
}

function missedItems(record: PersonRecord, visit: StudyVisit, context: ItemContext): WaitingItem[] {
	const { person, content, visits } = record;
	const isMended = visits.some((one) => one.visitNumber === visit.visitNumber && isLive(one));
	if (isMended || visits.some((one) => isAttendedLater(one, visit))) return [];
	const label = visitLabel(content, visit.visitNumber);
	const next = visits.find((one) => isLive(one) && one.visitNumber > visit.visitNumber);
	return [
		{
			...frame('missed', record, visit),
			tone: 'rose',
			title: `${person.code} did not come at ${formatTime(visit.startMs, context.zone)}`,
			what: `${label}, ${formatDayTime(visit.startMs, context.zone)} on ${visit.rigName}.`,
			ifNothing: `${label} is lost, and the hours to the visits after it no longer fit.`,
			byMs: next?.startMs ?? visit.startMs + dayMs,
			act: { label: 'See what can be mended', href: visitHref(context, visit) }
		}
	];
}

function isAttendedLater(one: StudyVisit, missed: StudyVisit): boolean {
	return one.state === 'attended' && one.visitNumber > missed.visitNumber;
}

function attendanceItem(
	record: PersonRecord,
	visit: StudyVisit,
	context: ItemContext
): WaitingItem {
	const { person, content } = record;
	const label = visitLabel(content, visit.visitNumber);
	return {
		...frame('attendance', record, visit),
		tone: 'amber',
		title: `Did ${person.code} come?`,
		what: `${label} ended ${formatShortDay(visit.endMs, context.zone)}, ${formatTime(visit.endMs, context.zone)}, and nobody has said.`,
		ifNothing: 'Nobody knows whether it counts; a missed visit would not be mended in time.',
		byMs: visit.endMs + dayMs / 4,
		act: { label: 'Say whether they came', href: visitHref(context, visit) }
	};
}

function requestItem(record: PersonRecord, visit: StudyVisit, context: ItemContext): WaitingItem {
	const { person, content } = record;
	const label = visitLabel(content, visit.visitNumber);
	const when = formatDayTime(visit.startMs, context.zone);
	const isDeclined = visit.answer === 'declined';
	const words = visit.hasAnswerNote ? ' They left a note.' : '';
	return {
		...frame(isDeclined ? 'declined' : 'asks-other-time', record, visit),
		tone: isDeclined ? 'rose' : 'amber',
		title: isDeclined ? `${person.code} declined` : `${person.code} asks for another time`,
		what: `${label}, ${when} on ${visit.rigName}.${words}`,
		ifNothing: 'The visit stays booked at a time they have said they cannot come.',
		byMs: visit.startMs,
		act: { label: 'See the places', href: visitHref(context, visit) }
	};
}

function consentItems(record: PersonRecord, context: ItemContext): WaitingItem[] {
	const { person, content, visits } = record;
	const { consentTextVersion } = content;
	if (person.consent?.textVersion === consentTextVersion) return [];
	const next = visits.find(({ state, endMs }) => state === 'booked' && endMs > context.nowMs);
	const href = `${personHref(context, person.id)}#consent`;
	const signed = person.consent;
	return [
		{
			...frame('consent', record),
			tone: next ? 'amber' : 'plain',
			title: signed
				? `${person.code} must sign consent ${consentTextVersion}`
				: `${person.code} has no consent on record`,
			what: signed
				? `Signed ${signed.textVersion}; ${consentTextVersion} is in force.`
				: `Enrolled ${formatShortDay(person.enrolledAtMs, context.zone)}; text ${consentTextVersion} is in force.`,
			ifNothing: signed ? 'The next visit must not start.' : 'No visit can be booked.',
			byMs: next?.startMs ?? null,
			byText: next ? null : 'before a visit is booked',
			act: { label: 'Record consent', href }
		}
	];
}

function bookingItems(record: PersonRecord, context: ItemContext): WaitingItem[] {
	const { person, content, visits } = record;
	if (person.consentedAtMs === null) return [];
	const live = new Set(visits.filter(isLive).map(({ visitNumber }) => visitNumber));
	const missed = new Set(
		visits.filter(({ state }) => state === 'no-show').map(({ visitNumber }) => visitNumber)
	);
	const open = content.visits.filter(({ number }) => !live.has(number) && !missed.has(number));
	if (open.length === 0) return [];
	const isFirst = live.size === 0;
	const labels = open.map(({ label }) => label).join(', ');
	const days = Math.max(0, Math.floor((context.nowMs - person.consentedAtMs) / dayMs));
	return [
		{
			...frame('book', record),
			tone: isFirst && days >= 7 ? 'amber' : 'plain',
			title: isFirst
				? `${person.code} has no visit booked`
				: `${person.code} has ${open.length === 1 ? 'a visit' : `${open.length} visits`} without a place`,
			what: isFirst
				? `Consented ${formatShortDay(person.consentedAtMs, context.zone)}, ${days === 0 ? 'today' : `${countDays(days)} ago`}.`
				: `${labels}.`,
			ifNothing: isFirst
				? 'They wait, and the longer they wait the fewer come.'
				: 'Their chain ends before the protocol does.',
			byMs: isFirst ? person.consentedAtMs + 7 * dayMs : null,
			byText: isFirst ? null : 'while the hours still fit',
			act: { label: 'Find places', href: `${personHref(context, person.id)}/places` }
		}
	];
}

function mailItems(
	record: PersonRecord,
	failedMails: readonly Message[],
	context: ItemContext
): WaitingItem[] {
	const { person, content } = record;
	const [mail] = failedMails.filter(({ participantId }) => participantId === person.id);
	if (!mail) return [];
	const about = mail.visitNumber === null ? '' : ` about ${visitLabel(content, mail.visitNumber)}`;
	const isOver = mail.visitStartMs !== null && mail.visitStartMs <= context.nowMs;
	if (isOver) return [];
	const isUnknown = mail.state === 'unknown';
	return [
		{
			...frame('mail-failed', record),
			tone: 'rose',
			title: isUnknown
				? `Whether ${person.code} got the ${mailNames[mail.kind]} is not known`
				: `${person.code} has not got the ${mailNames[mail.kind]}`,
			what: isUnknown
				? `The connection broke while the mail${about} was handed over.`
				: `The mail${about} could not be delivered. The visit stays booked.`,
			ifNothing: 'They may not know of it, or come at the wrong time.',
			byMs: mail.visitStartMs,
			byText: mail.visitStartMs === null ? 'soon' : null,
			act: {
				label: 'Mend the address, send again',
				href: `${personHref(context, person.id)}/details`
			}
		}
	];
}

const mailNames: Record<Message['kind'], string> = {
	invitation: 'invitation',
	moved: 'news of the move',
	cancelled: 'cancellation',
	withdrawn: 'confirmation of withdrawal'
};

function frame(
	kind: WaitingItem['kind'],
	{ person }: PersonRecord,
	visit?: StudyVisit
): Pick<WaitingItem, 'key' | 'kind' | 'participantId' | 'bookingId' | 'byText'> {
	const bookingId = visit?.bookingId ?? null;
	const key = `${kind} ${bookingId ?? person.id}`;
	return { key, kind, participantId: person.id, bookingId, byText: null };
}

export function personHref({ studyId }: { studyId: string }, participantId: string): string {
	return `/studies/${studyId}/people/${participantId}`;
}

export function visitHref(
	context: { studyId: string },
	visit: Pick<StudyVisit, 'participantId' | 'bookingId'>
): string {
	return `${personHref(context, visit.participantId)}/visits/${visit.bookingId}`;
}

function countDays(days: number): string {
	return days === 1 ? '1 day' : `${days} days`;
}
