import { and, asc, eq, lte, sql } from 'drizzle-orm';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import { createTask } from '$scheduler/tasks/create-task';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import { placedRegionSchema } from '$scheduler/perturbations/region-settings';
import { drawStyle, drawTraits } from '$scheduler/learners/draw-traits';
import {
	simulateBlock,
	startPerson,
	type PersonState,
	type PersonTraits
} from '$scheduler/learners/simulated-person';
import { createSeededStream, type SeededStream } from '$scheduler/random/seeded-stream';
import { hasBlockToRun } from '$lib/decisions/kind-words';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { allocateParticipant } from '$lib/server/allocation/allocate-participant';
import { recordAttendance } from '$lib/server/attendance/record-attendance';
import { issueDueBundles } from '$lib/server/bundles/issue-due-bundles';
import { booking, decision, participant } from '$lib/server/db/schema';
import { applyDueFallbacks } from '$lib/server/decisions/apply-due-fallbacks';
import { decideDue } from '$lib/server/decisions/decide-due';
import { decideForPerson } from '$lib/server/decisions/decide-for-person';
import { findEffectiveBlock } from '$lib/server/decisions/effective-block';
import { loadDecisionWithSettlement } from '$lib/server/decisions/load-decision';
import { settleDecision } from '$lib/server/decisions/settle-decision';
import { storeUpload } from '$lib/server/intake/store-upload';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import type { DemoWorld } from './demo-world';
import { demoNowMs, hourMs } from './demo-time';

export type Actors = Map<
	string,
	{ traits: PersonTraits; state: PersonState; stream: SeededStream }
>;
export type DemoStudy = { studyId: string; content: ProtocolContent; seed: number; actors: Actors };

const minuteMs = 60_000;

/** Everything that the second process would have done by now. */
export async function catchUp(world: DemoWorld): Promise<void> {
	const { db, clock, signingKey } = world;
	await decideDue(db, servicesOf(world));
	await applyDueFallbacks(db, clock);
	await issueDueBundles(db, { clock, signingKey });
}

function servicesOf({ clock, settings, mail }: DemoWorld) {
	return {
		clock,
		allocate: async (tx: Parameters<typeof allocateParticipant>[0], participantId: string) => {
			const allocated = await allocateParticipant(tx, { clock, settings }, participantId);
			if (allocated) await enqueueInvitations(tx, clock, mail, participantId);
			return allocated;
		}
	};
}

/** Runs every booked visit that ends before `untilMs`, in order of time, block by block. */
export async function runVisits(
	world: DemoWorld,
	study: DemoStudy,
	untilMs: number
): Promise<void> {
	for (;;) {
		const next = await findNextVisit(world, study.studyId, untilMs);
		if (!next) return;
		world.clock.set(next.startMs - 12 * hourMs);
		await catchUp(world);
		world.clock.set(next.startMs);
		await catchUp(world);
		if (next.isMissed) await missVisit(world, study, next.id);
		else await runVisit(world, study, next);
		if (world.clock.now() < demoNowMs - 24 * hourMs) await settleHeld(world, study.studyId, 'all');
	}
}

type NextVisit = {
	id: string;
	participantId: string;
	code: string;
	visitNumber: number;
	startMs: number;
	isMissed: boolean;
};

async function findNextVisit(
	{ db }: DemoWorld,
	studyId: string,
	untilMs: number
): Promise<NextVisit | null> {
	const [row] = await db
		.select({
			id: booking.id,
			participantId: booking.participantId,
			code: participant.code,
			visitNumber: booking.visitNumber,
			during: booking.during
		})
		.from(booking)
		.innerJoin(participant, eq(participant.id, booking.participantId))
		.where(
			and(
				eq(booking.studyId, studyId),
				eq(booking.state, 'booked'),
				lte(sql`upper(${booking.during})`, new Date(untilMs).toISOString())
			)
		)
		.orderBy(asc(sql`lower(${booking.during})`), asc(participant.code))
		.limit(1);
	if (!row) return null;
	const startMs = row.during.startsAt.getTime();
	// One person did not come this morning: the coordinator's first task of the day.
	const isMissed = startMs > demoNowMs - 2.5 * hourMs && row.visitNumber > 2;
	return { ...row, startMs, isMissed };
}

async function missVisit(world: DemoWorld, study: DemoStudy, bookingId: string): Promise<void> {
	world.clock.set(world.clock.now() + 20 * minuteMs);
	const { studyId } = study;
	const grant = await world.grant('coordinator', 'attendance:record', { studyId });
	await recordAttendance(world.db, world.clock, grant, { bookingId, outcome: 'no-show' });
}

async function runVisit(world: DemoWorld, study: DemoStudy, visit: NextVisit): Promise<void> {
	const { db, clock } = world;
	const plan = study.content.visits.find((found) => found.number === visit.visitNumber);
	const upload = await world.grant('operator', 'trials:upload', { studyId: study.studyId });
	for (const { number } of plan?.blocks ?? []) {
		const trials = await performBlock(world, study, { ...visit, blockNumber: number });
		clock.set(clock.now() + 15 * minuteMs);
		const name = `${visit.code}-visit-${visit.visitNumber}-block-${number}.csv`;
		const bytes = writeFile({ study, visit, blockNumber: number, trials });
		const stored = await storeUpload(db, clock, upload, { name, bytes });
		if (!stored.ok)
			throw new Error(`${name} was not stored: ${JSON.stringify(stored).slice(0, 400)}`);
		await decideForPerson(db, servicesOf(world), visit.participantId);
		clock.set(clock.now() + minuteMs);
		await catchUp(world);
	}
}

/** What the simulated person does with the block that the rig was given. */
async function performBlock(
	world: DemoWorld,
	study: DemoStudy,
	place: NextVisit & { blockNumber: number }
): Promise<number[][]> {
	const actor = findActor(study, place.code);
	const planned = study.content.visits
		.find((found) => found.number === place.visitNumber)
		?.blocks.find((found) => found.number === place.blockNumber);
	const [row] = await world.db
		.select({ id: decision.id })
		.from(decision)
		.where(
			and(
				eq(decision.participantId, place.participantId),
				eq(decision.visitNumber, place.visitNumber),
				eq(decision.blockNumber, place.blockNumber)
			)
		);
	const decided =
		row &&
		(await loadDecisionWithSettlement(world.db, { decisionId: row.id, studyId: study.studyId }));
	const region = placedRegionSchema.safeParse(
		decided ? findEffectiveBlock(decided)?.parameters.region : null
	);
	const block = simulateBlock({
		task: createScaledTask(createTask(taskRecordSchema.parse(study.content.task))),
		traits: actor.traits,
		state: actor.state,
		stream: actor.stream,
		trialCount: planned?.trials ?? 60,
		...(region.success ? { region: region.data } : {})
	});
	actor.state = block.state;
	return block.executions;
}

function findActor({ actors, content, seed }: DemoStudy, code: string) {
	const known = actors.get(code);
	if (known) return known;
	const stream = createSeededStream(seed, actors.size);
	const { tolerance } = taskRecordSchema.parse(content.task);
	const traits = drawTraits(stream, { style: drawStyle(stream), tolerance });
	const made = { traits, state: startPerson(traits), stream };
	actors.set(code, made);
	return made;
}

type FileParts = { study: DemoStudy; visit: NextVisit; blockNumber: number; trials: number[][] };

function writeFile({ study, visit, blockNumber, trials }: FileParts): Uint8Array {
	const { variables } = taskRecordSchema.parse(study.content.task);
	const header = ['participant', 'visit', 'block', 'trial', ...variables.map(({ name }) => name)];
	const rows = trials.map((trial, index) =>
		[
			visit.code,
			visit.visitNumber,
			blockNumber,
			index + 1,
			...trial.map((value) => value.toFixed(4))
		].join(',')
	);
	return new TextEncoder().encode([header.join(','), ...rows].join('\n') + '\n');
}

/** The approver lets held blocks run, all of them or all but the first few by code. */
export async function settleHeld(
	world: DemoWorld,
	studyId: string,
	which: 'all' | { leave: number }
): Promise<void> {
	const { db, clock } = world;
	const held = await db
		.select({ id: decision.id, kind: decision.kind, readyAt: decision.readyAt })
		.from(decision)
		.innerJoin(participant, eq(participant.id, decision.participantId))
		.where(and(eq(decision.studyId, studyId), eq(decision.state, 'held')))
		.orderBy(asc(decision.readyAt), asc(participant.code));
	const settled = which === 'all' ? held : held.slice(which.leave);
	const grant = await world.grant('approver', 'decision:settle', { studyId });
	for (const { id, kind } of settled) {
		const action = hasBlockToRun(kind) ? 'use' : 'plain-practice';
		const reason = action === 'use' ? '' : 'Looked at: the rig is fine, practice goes on.';
		await settleDecision(db, clock, grant, {
			decisionId: id,
			input: { action, reason, sizePercent: 100 }
		});
	}
}
