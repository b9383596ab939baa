import {
	equaliseBlockLengths,
	policySettingsSchema,
	type PolicySettings
} from '$scheduler/policies/policy-settings';
import { planListedBlock } from '$scheduler/protocol/plan-listed-block';
import { createTask } from '$scheduler/tasks/create-task';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import type { DecisionInputsInput } from '$scheduler/policies/decision-record';
import type { DecisionKind, ExecutedKind } from '$scheduler/policies/policy-memory';
import type { PolicyStateInput } from '$scheduler/policies/policy-state';
import { EXECUTED_KINDS } from '$scheduler/policies/policy-memory';
import { findEffectiveBlock, type BlockPlanned } from './effective-block';
import { slotKey, type Slot } from './find-next-slot';
import type { PersonOnRecord, StoredDecision } from './load-person';
import { buildYokedRule } from './build-yoked-rule';
import type { MasterChain } from './load-master-chain';
import { replayShiftTrials } from './replay-shift-trials';

/** Trials of a stored block in the order they were made; blanks as null. */
export type ReadTrials = (blockId: string) => Promise<(number | null)[][]>;

/** Where what a decision depends on is read from. */
export type DecisionSources = {
	readTrials: ReadTrials;
	/** What the master of a yoked person has run, and whether they still take part. */
	readMaster: () => Promise<MasterChain | null>;
	/** The instant of the decision. */
	nowMs: number;
};

/**
 * Everything the decision for one place depends on, read from the record: the policy of the frozen
 * version, the block before, and the memory that the last decision left.
 */
export async function buildInputs(
	person: PersonOnRecord,
	slot: Slot,
	sources: DecisionSources
): Promise<DecisionInputsInput> {
	const { content } = person;
	const { readTrials } = sources;
	const before = findDecisionBefore(person, slot);
	return {
		task: taskRecordSchema.parse(content.task),
		protocol: readSettings(person, slot),
		rule: await findRule(person, { slot, before, sources }),
		state: {
			...describeDay(person, slot),
			release: before?.kind === 'hold' && before.state === 'settled',
			last: await readLastBlock(person, { slot, before, readTrials }),
			memory: before ? readMemory(before) : {}
		}
	};
}

/** The frozen policy with every block as long as this place's: blinding needs one length. */
export function readSettings(person: PersonOnRecord, slot: Slot): PolicySettings {
	const settings = policySettingsSchema.parse(person.content.policy);
	return equaliseBlockLengths({ ...settings, blockTrials: slot.trials });
}

type RulePlace = { slot: Slot; before: StoredDecision | null; sources: DecisionSources };

/**
 * Adaptive time of an adaptive arm is the policy's, that of a yoked arm the master's; everything else is
 * the protocol's own block.
 */
async function findRule(
	person: PersonOnRecord,
	{ slot, before, sources }: RulePlace
): Promise<DecisionInputsInput['rule']> {
	const arm = person.content.arms.find((found) => found.key === person.arm);
	if (slot.purpose === 'adaptive' && arm?.rule === 'adaptive') return { kind: 'adaptive' };
	if (slot.purpose === 'adaptive' && arm?.rule === 'yoked') {
		const { nowMs } = sources;
		return buildYokedRule(person, { slot, nowMs, master: await sources.readMaster() });
	}
	const task = createScaledTask(createTask(taskRecordSchema.parse(person.content.task)));
	const cloud = before ? (readMemory(before)?.cloud ?? null) : null;
	return { kind: 'fixed', block: planListedBlock(slot.plan, { task, cloud }) };
}

function describeDay(person: PersonOnRecord, slot: Slot) {
	const inVisit = person.slots.filter((other) => other.visitNumber === slot.visitNumber);
	const earlier = inVisit.filter((other) => other.indexInVisit < slot.indexInVisit);
	const trialsToday = earlier.reduce(
		(sum, other) => sum + (person.blocks.get(slotKey(other))?.trialCount ?? 0),
		0
	);
	const later = inVisit.filter((other) => other.indexInVisit >= slot.indexInVisit);
	return {
		day: slot.visitNumber,
		blockInDay: slot.indexInVisit,
		blocksLeftToday: later.length,
		trialsToday,
		trialsLeftToday: later.reduce((sum, other) => sum + other.trials, 0),
		gapHours: slot.indexInVisit === 0 ? findGapHours(person, slot.visitNumber) : null
	};
}

/** Hours between the end of the visit before and the start of this one, as booked. */
function findGapHours(person: PersonOnRecord, visitNumber: number): number | null {
	const numbers = [...person.visits.keys()].filter((number) => number < visitNumber);
	const before = person.visits.get(Math.max(...numbers));
	const here = person.visits.get(visitNumber);
	if (!before || !here) return null;
	const hours = (here.during.startsAt.getTime() - before.during.endsAt.getTime()) / 3_600_000;
	return Math.max(0, hours);
}

function findDecisionBefore(person: PersonOnRecord, slot: Slot): StoredDecision | null {
	const index = person.slots.findIndex((other) => slotKey(other) === slotKey(slot));
	const earlier = new Set(person.slots.slice(0, index).map(slotKey));
	return person.decisions.filter((found) => earlier.has(slotKey(found))).at(-1) ?? null;
}

function readMemory(before: StoredDecision): PolicyStateInput['memory'] {
	return (JSON.parse(before.output) as { memory: PolicyStateInput['memory'] }).memory;
}

type LastOptions = { slot: Slot; before: StoredDecision | null; readTrials: ReadTrials };

/** The block of the place before, if its data came; the kind that really ran, not the one planned. */
async function readLastBlock(
	person: PersonOnRecord,
	{ slot, before, readTrials }: LastOptions
): Promise<PolicyStateInput['last']> {
	const index = person.slots.findIndex((other) => slotKey(other) === slotKey(slot));
	const place = person.slots[index - 1];
	const stored = place && person.blocks.get(slotKey(place));
	if (!place || !stored) return null;
	const ran = findBlockThatRan(place, before && slotKey(before) === slotKey(place) ? before : null);
	const whole = (await readTrials(stored.id)).filter(isComplete);
	const { region, rule } = ran.parameters;
	if (ran.kind === 'shift')
		return replayShiftTrials(person, { trials: whole, before, planned: ran }).last;
	return {
		kind: readKind(ran.kind),
		trials: whole,
		...(region ? { region: region as never } : {}),
		...(rule ? { rule: rule as never } : {})
	};
}

function isComplete(execution: (number | null)[]): execution is number[] {
	return execution.every((value) => value !== null);
}

/**
 * What ran in a place: the block whose file was handed out. Without a file the rig runs plain
 * practice (the declared fallback), or the protocol's own baseline or retention block.
 */
export function findBlockThatRan(place: Slot, decided: StoredDecision | null): BlockPlanned {
	const fallback: BlockPlanned = {
		kind: findPlainKind(place.purpose),
		parameters: { trials: place.trials }
	};
	if (!decided?.wasIssued) return fallback;
	return findEffectiveBlock(decided) ?? fallback;
}

/** What a rig runs in a place without a file of its own: nothing that moves the target or penalizes. */
function findPlainKind(purpose: Slot['purpose']): ExecutedKind {
	const own = (['baseline', 'retention', 'probe'] as const).find((kind) => kind === purpose);
	return own ?? 'practice';
}

function readKind(kind: DecisionKind): ExecutedKind {
	const known = EXECUTED_KINDS.find((found) => found === kind);
	if (!known) throw new RangeError(`a block of kind ${kind} cannot have run`);
	return known;
}
