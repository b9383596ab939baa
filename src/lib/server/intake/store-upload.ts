import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { and, eq, inArray } from 'drizzle-orm';
import { block, booking, trial, upload } from '$lib/server/db/schema';
import { enqueue } from '$lib/server/jobs/open-jobs';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { sha256Hex } from '$lib/server/record/canonical-json';
import type { FileProblem, Mapping } from '$lib/intake/column-use';
import { checkRows, type CheckedBlock, type CheckedFile } from './check-rows';
import { judgeQuality } from './judge-quality';
import { loadRoster, type StudyRoster } from './load-roster';
import { proposeMapping } from './propose-mapping';
import { readTable, type Table } from './read-table';
import { stripColumns } from './strip-columns';

export type TrialFile = { name: string; bytes: Uint8Array; mapping?: Mapping | undefined };
export type Preview =
	| { ok: false; code: string; message: string }
	| {
			ok: true;
			header: string[];
			mapping: Mapping;
			sample: string[][];
			checked: CheckedFile;
			isKnown: boolean;
	  };
export type Stored =
	| { ok: true; trialCount: number; blockCount: number; warnings: FileProblem[] }
	| { ok: false; reason: 'unreadable'; message: string }
	| { ok: false; reason: 'same-file' }
	| { ok: false; reason: 'faults'; faults: FileProblem[]; warnings: FileProblem[] };

/** What a file would store and what is wrong with it. Stores nothing. */
export async function previewUpload(
	db: Database,
	clock: Clock,
	grant: Grant<'trials:upload'>,
	file: TrialFile
): Promise<Preview> {
	const read = readTable(file.bytes);
	if (!read.ok) return read;
	const roster = await loadRoster(db, clock, grant.studyId);
	const mapping = file.mapping ?? proposeMapping(read.table, roster.variables);
	const checked = checkRows(read.table, mapping, roster);
	const known = await db
		.select({ id: upload.id })
		.from(upload)
		.where(and(eq(upload.studyId, grant.studyId), eq(upload.sha256, sha256Hex(file.bytes))));
	const sample = read.table.rows.slice(0, 5).map((row) => row.fields);
	return {
		ok: true,
		header: read.table.header,
		mapping,
		sample,
		checked,
		isKnown: known.length > 0
	};
}

/**
 * Stores a file and its trials in one transaction with the jobs that follow: all of it or nothing.
 * The same bytes a second time add nothing.
 */
export async function storeUpload(
	db: Database,
	clock: Clock,
	grant: Grant<'trials:upload'>,
	file: TrialFile
): Promise<Stored> {
	const read = readTable(file.bytes);
	if (!read.ok) return { ok: false, reason: 'unreadable', message: read.message };
	return db
		.transaction(async (tx): Promise<Stored> => {
			const roster = await loadRoster(tx, clock, grant.studyId);
			const mapping = file.mapping ?? proposeMapping(read.table, roster.variables);
			const uploadId = await claimUpload(tx, { clock, grant, file, mapping, table: read.table });
			if (!uploadId) return { ok: false, reason: 'same-file' };
			const checked = checkRows(read.table, mapping, roster);
			if (checked.faults.length > 0) throw new RefusedFile(checked);
			for (const found of checked.blocks)
				await storeBlock(tx, { clock, grant, roster, uploadId, found });
			await markAttended(tx, clock, roster, checked.blocks);
			for (const participantId of participantsOf(roster, checked.blocks)) {
				await enqueue(tx, 'decide', { participantId });
			}
			const trialCount = checked.blocks.reduce((sum, found) => sum + found.trials.length, 0);
			await recordEvent(tx, clock, actorOf(grant), {
				kind: 'trials-uploaded',
				item: 'raw-trials',
				labId: grant.labId,
				studyId: grant.studyId,
				body: {
					uploadId,
					sha256: sha256Hex(file.bytes),
					trialCount,
					blockCount: checked.blocks.length
				}
			});
			return {
				ok: true,
				trialCount,
				blockCount: checked.blocks.length,
				warnings: checked.warnings
			};
		})
		.catch((error: unknown): Stored => {
			if (!(error instanceof RefusedFile)) throw error;
			const { faults, warnings } = error.checked;
			return { ok: false, reason: 'faults', faults, warnings };
		});
}

/** Rolls the transaction back, so that a refused file leaves no trace. */
class RefusedFile extends Error {
	constructor(readonly checked: CheckedFile) {
		super('file refused');
	}
}

type Claim = { clock: Clock; grant: Grant; file: TrialFile; mapping: Mapping; table: Table };

async function claimUpload(tx: Transaction, claim: Claim): Promise<string | null> {
	const { clock, grant, file, mapping, table } = claim;
	const rows = await tx
		.insert(upload)
		.values({
			studyId: grant.studyId,
			fileName: file.name.slice(0, 200),
			sha256: sha256Hex(file.bytes),
			content: stripColumns(file.bytes, table),
			mapping,
			rowCount: table.rows.length,
			trialCount: table.rows.length,
			uploadedBy: grant.personId,
			uploadedAt: new Date(clock.now())
		})
		.onConflictDoNothing()
		.returning({ id: upload.id });
	return rows[0]?.id ?? null;
}

type BlockToStore = {
	clock: Clock;
	grant: Grant;
	roster: StudyRoster;
	uploadId: string;
	found: CheckedBlock;
};

const chunkSize = 5_000;

async function storeBlock(
	tx: Transaction,
	{ clock, grant, roster, uploadId, found }: BlockToStore
) {
	const quality = judgeQuality(found, roster.variables);
	const [row] = await tx
		.insert(block)
		.values({
			studyId: grant.studyId,
			participantId: requireId(roster, found.code),
			visitNumber: found.visitNumber,
			blockNumber: found.blockNumber,
			uploadId,
			trialCount: found.trials.length,
			quality: quality.verdict,
			qualityCodes: quality.codes,
			scoredAt: new Date(clock.now())
		})
		.returning({ id: block.id });
	if (!row) throw new Error('block was not stored');
	const trials = found.trials.map(({ number, execution }) => ({
		blockId: row.id,
		number,
		execution
	}));
	for (let start = 0; start < trials.length; start += chunkSize) {
		await tx.insert(trial).values(trials.slice(start, start + chunkSize));
	}
}

/** Data of a visit show that the person came. */
async function markAttended(
	tx: Transaction,
	clock: Clock,
	roster: StudyRoster,
	blocks: CheckedBlock[]
): Promise<void> {
	const visits = new Map(blocks.map((found) => [`${found.code} ${found.visitNumber}`, found]));
	for (const { code, visitNumber } of visits.values()) {
		await tx
			.update(booking)
			.set({ state: 'attended', changedAt: new Date(clock.now()) })
			.where(
				and(
					eq(booking.participantId, requireId(roster, code)),
					eq(booking.visitNumber, visitNumber),
					inArray(booking.state, ['booked'])
				)
			);
	}
}

function participantsOf(roster: StudyRoster, blocks: CheckedBlock[]): string[] {
	return [...new Set(blocks.map((found) => found.code))].map((code) => requireId(roster, code));
}

function requireId(roster: StudyRoster, code: string): string {
	const id = roster.idByCode.get(code);
	if (!id) throw new Error('a checked row names nobody of the roster');
	return id;
}
