import { and, eq, isNotNull, lte, ne, sql } from 'drizzle-orm';
import { createSeededStream } from '$scheduler/random/seeded-stream';
import { proposeChains } from '$lib/server/bookings/propose-chains';
import { savePlan } from '$lib/server/bookings/save-plan';
import type { Settings } from '$lib/server/config';
import type { Database } from '$lib/server/db/client';
import { booking, outbox, participant } from '$lib/server/db/schema';
import { enrolPeople } from '$lib/server/people/enrol-people';
import { recordConsent } from '$lib/server/people/record-consent';
import { withdrawPerson } from '$lib/server/people/withdraw-person';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import { buildLab } from './build-lab';
import { buildStudy, freezeLargerVersion } from './build-study';
import { listPeople } from './cast';
import { at, createSetClock, demoNowMs, hourMs } from './demo-time';
import { createDemoWorld, type DemoWorld } from './demo-world';
import { catchUp, runVisits, settleHeld, type DemoStudy } from './run-visits';

/** When how many people enrol, sign and are booked. */
const waves: { date: string; count: number }[] = [
	{ date: '2027-02-24', count: 4 },
	{ date: '2027-02-25', count: 4 },
	{ date: '2027-03-01', count: 3 },
	{ date: '2027-03-03', count: 3 },
	{ date: '2027-03-05', count: 3 },
	{ date: '2027-03-08', count: 3 },
	{ date: '2027-03-09', count: 2 }
];

/**
 * Plays the demo's invented study from its first day to `demoNowMs`, through the same functions as
 * the pages: enrolment, consent, booking, simulated trials, decisions, mails. One seed, one story.
 */
export async function seedDemo(options: {
	db: Database;
	settings: Settings;
	seed: number;
	report: (line: string) => void;
}): Promise<void> {
	const clock = createSetClock(at('2027-02-18', '09:00'));
	const world = createDemoWorld({ db: options.db, clock, settings: options.settings });
	const { labId } = await buildLab(world);
	clock.set(at('2027-02-22', '10:00'));
	const studyId = await buildStudy(world, labId, options.seed);
	const running = await loadRunningVersion(options.db, clock, studyId);
	if (!running) throw new Error('the demo study has no running version');
	const { content } = running;
	const study: DemoStudy = { studyId, content, seed: options.seed, actors: new Map() };
	const waiting = listPeople();
	for (const { date, count } of waves) {
		await runVisits(world, study, at(date, '16:40'));
		clock.set(at(date, '16:45'));
		await admit(world, study, waiting.splice(0, count));
		options.report(`Demo: ${date}, ${24 - waiting.length} people enrolled`);
	}
	await runVisits(world, study, demoNowMs);
	await finish(world, study, waiting);
}

/** Enrols, records consent and books whole chains, as a coordinator would. */
async function admit(world: DemoWorld, study: DemoStudy, people: ReturnType<typeof listPeople>) {
	const { db, clock, keys } = world;
	const { studyId } = study;
	const rows = people.map((cells, index) => ({ line: index + 1, cells }));
	const enrolGrant = await world.grant('coordinator', 'participant:enrol', { studyId });
	const enrolled = await enrolPeople(db, clock, enrolGrant, { keys, rows });
	if (!enrolled.ok || enrolled.stayed.length > 0) {
		throw new Error(`not enrolled: ${JSON.stringify(enrolled).slice(0, 400)}`);
	}
	for (const code of enrolled.codes) {
		const [row] = await db
			.select({ id: participant.id })
			.from(participant)
			.where(and(eq(participant.studyId, studyId), eq(participant.code, code)));
		if (row) await consentAndBook(world, study, row.id);
	}
}

async function consentAndBook(
	world: DemoWorld,
	{ studyId, content }: DemoStudy,
	participantId: string
) {
	const { db, clock, mail } = world;
	const consentGrant = await world.grant('coordinator', 'consent:record', { studyId });
	const signedOn = new Date(clock.now()).toISOString().slice(0, 10);
	await recordConsent(db, clock, consentGrant, {
		participantIds: [participantId],
		textVersion: content.consentTextVersion,
		signedOn
	});
	const grant = await world.grant('coordinator', 'booking:change', { studyId });
	const proposed = await proposeChains(db, clock, grant, { participantId, chainCount: 1 });
	const chain = proposed.ok ? proposed.chains[0] : undefined;
	if (!proposed.ok || !chain) return;
	const saved = await savePlan(db, clock, grant, {
		participantId,
		places: chain.visits,
		planVersion: proposed.plan.planVersion,
		mail
	});
	if (!saved.ok) throw new Error(`not booked: ${JSON.stringify(saved).slice(0, 400)}`);
}

/** The state in which the demo opens: two people only enrolled, one withdrawn, two decisions held. */
async function finish(world: DemoWorld, study: DemoStudy, waiting: ReturnType<typeof listPeople>) {
	const { db, clock, keys } = world;
	const { studyId } = study;
	clock.set(demoNowMs - 40 * 60_000);
	await catchUp(world);
	await freezeLargerVersion(world, studyId);
	const enrol = await world.grant('coordinator', 'participant:enrol', { studyId });
	const rows = waiting.map((cells, index) => ({ line: index + 1, cells }));
	await enrolPeople(db, clock, enrol, { keys, rows });
	await withdrawOne(world, study);
	await settleHeld(world, studyId, { leave: 2 });
	clock.set(demoNowMs);
	await catchUp(world);
	await markSentMails(db);
	await answerSome(db, study);
}

async function withdrawOne(world: DemoWorld, { studyId }: DemoStudy): Promise<void> {
	const { db, clock, mail } = world;
	const [row] = await db
		.select({ id: participant.id })
		.from(participant)
		.where(and(eq(participant.studyId, studyId), eq(participant.number, 6)));
	if (!row) return;
	const grant = await world.grant('coordinator', 'participant:withdraw', { studyId });
	await withdrawPerson(db, clock, grant, { participantId: row.id, mail });
}

/** Mails that were due before the demo opens went out then; the mailbox shows what is sent from now on. */
async function markSentMails(db: Database): Promise<void> {
	await db
		.update(outbox)
		.set({ state: 'sent', sentAt: sql`${outbox.dueAt}`, attempts: 1 })
		.where(and(eq(outbox.state, 'waiting'), lte(outbox.dueAt, new Date(demoNowMs))));
}

/** Most invited people have accepted; one asks for another time, one has not answered yet. */
async function answerSome(db: Database, { studyId, seed }: DemoStudy): Promise<void> {
	const stream = createSeededStream(seed, 9_999);
	const invited = await db
		.select({ id: booking.id, during: booking.during, number: participant.number })
		.from(booking)
		.innerJoin(participant, eq(participant.id, booking.participantId))
		.where(
			and(
				eq(booking.studyId, studyId),
				isNotNull(booking.invitedAt),
				ne(booking.state, 'cancelled')
			)
		);
	const upcoming = invited
		.filter(({ during }) => during.startsAt.getTime() > demoNowMs + 20 * hourMs)
		.sort(
			(a, b) => a.during.startsAt.getTime() - b.during.startsAt.getTime() || a.number - b.number
		);
	const [asking, silent] = [upcoming[2]?.id, upcoming[4]?.id];
	for (const { id, during } of invited) {
		if (id === silent) continue;
		const answer = id === asking ? 'asks-other-time' : 'accepted';
		const hoursBefore = (stream.nextUint32() % 20) + 2;
		const latestMs = Math.min(demoNowMs, during.startsAt.getTime());
		const answeredAt = new Date(latestMs - hoursBefore * hourMs);
		await db.update(booking).set({ answer, answeredAt }).where(eq(booking.id, id));
	}
}
