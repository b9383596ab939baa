import { and, asc, eq, sql } from 'drizzle-orm';
import postgres from 'postgres';
import { allocateParticipant } from '$lib/server/allocation/allocate-participant';
import { proposeChains } from '$lib/server/bookings/propose-chains';
import { savePlan } from '$lib/server/bookings/save-plan';
import { openDatabase, type Database, type Transaction } from '$lib/server/db/client';
import { booking, decision, participant } from '$lib/server/db/schema';
import { buildLab } from '$lib/server/demo/seed/build-lab';
import { buildStudy } from '$lib/server/demo/seed/build-study';
import { listPeople } from '$lib/server/demo/seed/cast';
import { at, createSetClock, hourMs } from '$lib/server/demo/seed/demo-time';
import { createDemoWorld, type DemoWorld } from '$lib/server/demo/seed/demo-world';
import { catchUp } from '$lib/server/demo/seed/run-visits';
import { decideForPerson } from '$lib/server/decisions/decide-for-person';
import { settleDecision } from '$lib/server/decisions/settle-decision';
import { storeUpload } from '$lib/server/intake/store-upload';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import { enrolPeople } from '$lib/server/people/enrol-people';
import { recordConsent } from '$lib/server/people/record-consent';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import type { TestDatabase } from '../create-database';
import { countInsteadOfDrawing } from './stand-in-ids';
import { createThrower } from './thrower';
import type { Home } from './web-server';

export type Played = { world: DemoWorld; labId: string; studyId: string };
export type Moment = { name: string; atMs: number };

type Play = {
	database: TestDatabase;
	home: Home;
	/** The arms of the sealed sequence; the other way round gives everybody the other arm. */
	arms: [string, string];
	/** When to stop and look, in order of time. */
	moments: Moment[];
	look: (played: Played, moment: Moment) => Promise<void>;
};

const allocationSeed = 11;
const personCount = 6;
/** Held decisions of these people are left to the fallback, all others are settled. */
const leftAlone = ['TW-003', 'TW-004'];

/**
 * Plays a small study by the product's own functions: six people, their baseline visit and practice
 * days, the same trials whatever their arm, decisions, settlements, files and mails.
 */
export async function playStudy(play: Play): Promise<void> {
	await countInsteadOfDrawing(play.database.ownerUrl);
	const { db, end } = openDatabase(play.database.appUrl, { max: 4 });
	try {
		const clock = createSetClock(at('2027-02-18', '09:00'));
		const world = createDemoWorld({ db, clock, settings: play.home.settings });
		const { labId } = await buildLab(world);
		clock.set(at('2027-02-22', '10:00'));
		const studyId = await buildStudy(world, labId, allocationSeed);
		await prepareInstance(play);
		const played = { world, labId, studyId };
		clock.set(at('2027-02-25', '08:45'));
		await admit(played);
		await runUntilLastMoment(play, played);
	} finally {
		await end();
	}
}

async function prepareInstance({ database, arms }: Play): Promise<void> {
	const owner = postgres(database.ownerUrl, { max: 1, onnotice: () => {} });
	try {
		await owner`insert into instance (kind) values ('own')`;
		// The seal cannot be changed: only the owner can, with its guard off.
		await owner`set session_replication_role = replica`;
		await owner`update allocation_seal
			set method = jsonb_set(method, '{arms}', ${owner.json(arms)})`;
	} finally {
		await owner.end();
	}
}

async function admit({ world, studyId }: Played): Promise<void> {
	const { db, clock, keys, mail } = world;
	const rows = listPeople()
		.slice(0, personCount)
		.map((cells, index) => ({ line: index + 1, cells }));
	const enrol = await world.grant('coordinator', 'participant:enrol', { studyId });
	const enrolled = await enrolPeople(db, clock, enrol, { keys, rows });
	if (!enrolled.ok || enrolled.codes.length !== personCount) throw new Error('not all enrolled');
	const people = await db.select().from(participant).orderBy(asc(participant.code));
	const consent = await world.grant('coordinator', 'consent:record', { studyId });
	await recordConsent(db, clock, consent, {
		participantIds: people.map(({ id }) => id),
		textVersion: '3',
		signedOn: '2027-02-25'
	});
	const change = await world.grant('coordinator', 'booking:change', { studyId });
	for (const { id: participantId } of people) {
		const found = await proposeChains(db, clock, change, { participantId, chainCount: 1 });
		const places = found.ok ? found.chains[0]?.visits : undefined;
		if (!found.ok || !places) throw new Error('no chain was found');
		const { planVersion } = found.plan;
		const saved = await savePlan(db, clock, change, { participantId, places, planVersion, mail });
		if (!saved.ok) throw new Error(`not booked: ${saved.reason}`);
	}
}

async function runUntilLastMoment(play: Play, played: Played): Promise<void> {
	const { world } = played;
	const moments = [...play.moments];
	const goOn = async (untilMs: number) => {
		while (moments[0] && moments[0].atMs <= untilMs) {
			const moment = moments.shift();
			if (!moment) return;
			world.clock.set(moment.atMs);
			await catchUp(world);
			await play.look(played, moment);
		}
		world.clock.set(untilMs);
		await catchUp(world);
	};
	const version = await loadRunningVersion(world.db, world.clock, played.studyId);
	if (!version) throw new Error('no version runs');
	const thrower = createThrower(version.content);
	while (moments.length > 0) {
		const visit = await findNextVisit(world.db, world.clock.now());
		if (!visit) throw new Error('there is no visit before the last moment');
		await goOn(visit.startMs - 12 * hourMs);
		await goOn(visit.startMs);
		const planned = version.content.visits.find(({ number }) => number === visit.visitNumber);
		for (const { number } of planned?.blocks ?? []) {
			await goOn(world.clock.now() + 15 * 60_000);
			await upload(played, thrower.throwBlock({ ...visit, blockNumber: number }));
			await decide(world, visit.participantId);
			await goOn(world.clock.now() + 60_000);
		}
		await settleMost(played);
	}
}

async function findNextVisit(db: Database, nowMs: number) {
	const [row] = await db
		.select({
			participantId: booking.participantId,
			code: participant.code,
			visitNumber: booking.visitNumber,
			during: booking.during
		})
		.from(booking)
		.innerJoin(participant, eq(participant.id, booking.participantId))
		.where(
			and(
				eq(booking.state, 'booked'),
				sql`not exists (select 1 from block b where b.participant_id = ${booking.participantId}
					and b.visit_number = ${booking.visitNumber})`
			)
		)
		.orderBy(asc(sql`lower(${booking.during})`), asc(participant.code))
		.limit(1);
	return row && { ...row, startMs: Math.max(row.during.startsAt.getTime(), nowMs) };
}

async function upload({ world, studyId }: Played, file: { name: string; bytes: Uint8Array }) {
	const grant = await world.grant('operator', 'trials:upload', { studyId });
	const stored = await storeUpload(world.db, world.clock, grant, file);
	if (!stored.ok) throw new Error(`${file.name}: ${JSON.stringify(stored).slice(0, 300)}`);
}

/** What the worker does when a person's trials are in. */
async function decide({ db, clock, settings, mail }: DemoWorld, participantId: string) {
	const allocate = async (tx: Transaction, id: string) => {
		const allocated = await allocateParticipant(tx, { clock, settings }, id);
		if (allocated) await enqueueInvitations(tx, clock, mail, id);
		return allocated;
	};
	await decideForPerson(db, { clock, allocate }, participantId);
}

async function settleMost({ world, studyId }: Played): Promise<void> {
	const { db, clock } = world;
	const grant = await world.grant('approver', 'decision:settle', { studyId });
	const held = await db
		.select({ id: decision.id, kind: decision.kind, code: participant.code })
		.from(decision)
		.innerJoin(participant, eq(participant.id, decision.participantId))
		.where(eq(decision.state, 'held'))
		.orderBy(asc(participant.code));
	for (const { id, kind, code } of held) {
		if (leftAlone.includes(code)) continue;
		const action = kind === 'hold' || kind === 'stop' ? 'plain-practice' : 'use';
		const reason = action === 'use' ? '' : 'Looked at: practice goes on.';
		const input = { action, reason, sizePercent: 100 } as const;
		await settleDecision(db, clock, grant, { decisionId: id, input });
	}
}
