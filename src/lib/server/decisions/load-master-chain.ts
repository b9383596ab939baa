import {
	blockParametersSchema,
	EXECUTED_KINDS,
	type BlockParameters,
	type ExecutedKind
} from '$scheduler/policies/policy-memory';
import type { Queryable } from '$lib/server/db/client';
import { findBlockThatRan, type ReadTrials } from './build-inputs';
import { slotKey } from './find-next-slot';
import { loadPerson, type PersonOnRecord, type StoredDecision } from './load-person';
import { replayShiftTrials } from './replay-shift-trials';

/** A place of the master's chain: null until it has run and is scored. */
export type MasterPlace = {
	scoredAtMs: number;
	kind: ExecutedKind;
	parameters: BlockParameters;
} | null;

export type MasterChain = { code: string; withdrawn: boolean; places: MasterPlace[] };

/** What the master ran in each place of the protocol, as their partner will get it. */
export async function loadMasterChain(
	db: Queryable,
	masterId: string | null,
	readTrials: ReadTrials
): Promise<MasterChain | null> {
	const master = masterId && (await loadPerson(db, masterId, { lock: false }));
	if (!master) return null;
	const places: MasterPlace[] = [];
	for (const index of master.slots.keys())
		places.push(await readPlace(master, { index, readTrials }));
	return { code: master.code, withdrawn: master.state === 'withdrawn', places };
}

async function readPlace(
	master: PersonOnRecord,
	{ index, readTrials }: { index: number; readTrials: ReadTrials }
): Promise<MasterPlace> {
	const slot = master.slots[index];
	const stored = slot && master.blocks.get(slotKey(slot));
	if (!slot || !stored) return null;
	const decided = master.decisions.find((found) => slotKey(found) === slotKey(slot)) ?? null;
	const ran = findBlockThatRan(slot, decided);
	const kind = EXECUTED_KINDS.find((known) => known === ran.kind) ?? 'practice';
	const parameters = blockParametersSchema.parse(ran.parameters);
	const { trials = slot.trials, region, feedback, targetOffset, clampSd } = parameters;
	return {
		scoredAtMs: stored.scoredAt.getTime(),
		kind,
		parameters: {
			trials,
			...(region ? { region } : {}),
			...(feedback ? { feedback } : {}),
			...(targetOffset === undefined ? {} : { targetOffset }),
			...(clampSd === undefined ? {} : { clampSd }),
			...(kind === 'shift'
				? { levels: await readLevels(master, { stored, decided, ran, readTrials }) }
				: {})
		}
	};
}

type ShiftPlace = {
	stored: { id: string };
	decided: StoredDecision | null;
	ran: ReturnType<typeof findBlockThatRan>;
	readTrials: ReadTrials;
};

/** Where the target lay in each of the master's trials. */
async function readLevels(master: PersonOnRecord, place: ShiftPlace): Promise<number[]> {
	const { stored, decided, ran, readTrials } = place;
	const trials = (await readTrials(stored.id)).filter((execution): execution is number[] =>
		execution.every((value) => value !== null)
	);
	return replayShiftTrials(master, { trials, before: decided, planned: ran }).levels;
}
