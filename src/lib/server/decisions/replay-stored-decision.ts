import { eq } from 'drizzle-orm';
import { canonicalJson as engineText } from '$scheduler/policies/canonical-json';
import { replayDecision, type Replay } from '$scheduler/policies/replay-decision';
import type { DecisionInputsInput } from '$scheduler/policies/decision-record';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import type { Mapping } from '$lib/intake/column-use';
import type { Queryable } from '$lib/server/db/client';
import {
	block,
	decision,
	participant,
	protocolVersion,
	upload,
	yokedPair
} from '$lib/server/db/schema';
import { checkRows } from '$lib/server/intake/check-rows';
import type { Roster } from '$lib/server/intake/roster';
import { readTable } from '$lib/server/intake/read-table';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import { buildInputs } from './build-inputs';
import { slotKey } from './find-next-slot';
import { loadMasterChain } from './load-master-chain';
import { loadPerson, type PersonOnRecord, type StoredDecision } from './load-person';
import { currentVersions, hashPolicy } from './versions';

export type ReplayVerdict =
	| { equal: true; sameVersions: boolean }
	| { equal: false; cause: string; name: string; stored: string; recomputed: string };

/**
 * Makes one stored decision again from the raw file as it is kept, the frozen version and the memory
 * that the decision before left, and compares the bytes.
 *
 * @throws {RangeError} when there is no such decision
 */
export async function replayStoredDecision(
	db: Queryable,
	decisionId: string
): Promise<ReplayVerdict> {
	const [row] = await db
		.select({ participantId: decision.participantId, protocolHash: decision.protocolHash })
		.from(decision)
		.where(eq(decision.id, decisionId));
	const person = row && (await loadAsThen(db, row));
	const stored = person?.decisions.find((found) => found.id === decisionId);
	if (!person || !stored) throw new RangeError('there is no such decision');
	const slot = person.slots.find((found) => slotKey(found) === slotKey(stored));
	if (!slot) throw new RangeError('the protocol has no such block');
	const asThen = rewindPerson(person, stored);
	const inputs = await buildInputs(asThen, slot, {
		readTrials: (blockId) => readRawTrials(db, blockId, person.content),
		readMaster: () => readMaster(db, person.id),
		nowMs: stored.decidedAt.getTime()
	});
	return describeReplay(person, stored, withRecordedPlace(inputs, stored));
}

/** By the version that the decision was made by, whatever the person follows now. */
function loadAsThen(db: Queryable, row: { participantId: string; protocolHash: string }) {
	const { participantId, protocolHash } = row;
	return loadPerson(db, participantId, { lock: false, protocolHash });
}

async function readMaster(db: Queryable, participantId: string) {
	const [pair] = await db
		.select({ masterId: yokedPair.masterId })
		.from(yokedPair)
		.where(eq(yokedPair.participantId, participantId));
	return loadMasterChain(db, pair?.masterId ?? null, (blockId) => readRawTrials(db, blockId));
}

/** The person as they were when the decision was made: later decisions and settlements do not count. */
function rewindPerson(person: PersonOnRecord, stored: StoredDecision): PersonOnRecord {
	const index = person.slots.findIndex((slot) => slotKey(slot) === slotKey(stored));
	const before = new Set(person.slots.slice(0, index).map(slotKey));
	const blocks = new Map([...person.blocks].filter(([key]) => before.has(key)));
	return {
		...person,
		blocks,
		decisions: person.decisions.filter((found) => before.has(slotKey(found)))
	};
}

/**
 * Visits may have been moved since: the hours of the gap and whether data had come are taken from
 * the record; trials, memory, policy and task from their sources.
 */
function withRecordedPlace(
	inputs: DecisionInputsInput,
	stored: StoredDecision
): DecisionInputsInput {
	const recorded = JSON.parse(stored.inputs) as DecisionInputsInput;
	const { gapHours, last } = recorded.state;
	return {
		...inputs,
		rule: withRecordedGap(inputs.rule, recorded.rule),
		state: { ...inputs.state, gapHours, ...(last === null ? { last: null } : {}) }
	};
}

/** A yoked person's own gap, as it was booked then. */
function withRecordedGap(
	rule: DecisionInputsInput['rule'],
	recorded: DecisionInputsInput['rule']
): DecisionInputsInput['rule'] {
	if (rule?.kind !== 'yoked' || recorded?.kind !== 'yoked') return rule;
	const { previousEndHours, gapMaxHours, pool } = recorded;
	return { ...rule, previousEndHours, gapMaxHours, pool };
}

function describeReplay(
	person: PersonOnRecord,
	stored: StoredDecision,
	inputs: DecisionInputsInput
): ReplayVerdict {
	const record = { ...(JSON.parse(stored.output) as object), inputs: JSON.parse(stored.inputs) };
	const versions = currentVersions(hashPolicy(person.content));
	const replay = replayDecision({ stored: record, inputs, versions, digest: sha256Hex });
	if (replay.equal) return compareBytes(stored, replay);
	const { cause, name } = replay;
	return {
		equal: false,
		cause,
		name,
		stored: show(replay.stored),
		recomputed: show(replay.recomputed)
	};
}

/** Equal values must also be equal bytes in the stored text. */
function compareBytes(
	stored: StoredDecision,
	replay: Extract<Replay, { equal: true }>
): ReplayVerdict {
	const text = engineText(JSON.parse(stored.output));
	if (text === stored.output) return { equal: true, sameVersions: replay.sameVersions };
	return {
		equal: false,
		cause: 'record-altered',
		name: 'stored text',
		stored: stored.output.slice(0, 80),
		recomputed: text.slice(0, 80)
	};
}

function show(value: unknown): string {
	return (value === undefined ? 'nothing' : canonicalJson(value)).slice(0, 400);
}

/** Trials of one block, read anew from the raw file with the mapping it was stored by. */
async function readRawTrials(
	db: Queryable,
	blockId: string,
	content?: ProtocolContent
): Promise<(number | null)[][]> {
	const [row] = await db
		.select({
			block,
			content: upload.content,
			mapping: upload.mapping,
			code: participant.code,
			protocol: protocolVersion.content
		})
		.from(block)
		.innerJoin(upload, eq(upload.id, block.uploadId))
		.innerJoin(participant, eq(participant.id, block.participantId))
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(eq(block.id, blockId));
	if (!row) throw new RangeError('there is no such block');
	const read = readTable(row.content);
	if (!read.ok) throw new RangeError(`the raw file cannot be read any more: ${read.message}`);
	const own = read.table.header.indexOf(findKeyColumn(row.mapping.columns, 'participant'));
	const table = {
		...read.table,
		rows: read.table.rows.filter(({ fields }) => fields[own] === row.code)
	};
	const checked = checkRows(
		table,
		withoutDates(row.mapping),
		rosterOf(content ?? row.protocol, row.code)
	);
	const found = checked.blocks.find(
		({ visitNumber, blockNumber }) =>
			visitNumber === row.block.visitNumber && blockNumber === row.block.blockNumber
	);
	if (!found) throw new RangeError(checked.faults[0]?.message ?? 'the raw file has no such block');
	return found.trials.map((trial) => trial.execution);
}

/** Dates were checked against the booking of that time; visits may have been moved since. */
function withoutDates(mapping: Mapping): Mapping {
	const columns = Object.fromEntries(
		Object.entries(mapping.columns).map(([name, use]) => [
			name,
			use.use === 'date' ? ({ use: 'ignore' } as const) : use
		])
	);
	return { ...mapping, columns };
}

function findKeyColumn(columns: Record<string, { use: string }>, use: string): string {
	return Object.entries(columns).find(([, found]) => found.use === use)?.[0] ?? '';
}

/** Everything the file may hold counts as expected: it was checked when it came. */
function rosterOf(content: ProtocolContent, code: string): Roster {
	const visits = new Map(
		content.visits.map((visit) => [
			visit.number,
			{ bookedOn: '', hasStarted: true, blocks: visit.blocks, stored: [] }
		])
	);
	const { variables } = taskRecordSchema.parse(content.task);
	return { people: new Map([[code, visits]]), variables };
}
