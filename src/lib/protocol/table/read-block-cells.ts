import { blockDraftSchema, type BlockDraft } from '../draft-parts';
import type { ListPlace } from '../edit/block-lists';
import type { ProtocolDraft } from '../protocol-draft';
import { nearestWord } from '../../ui/edit-distance';
import { visitName } from '../visit-name';
import { everyArm, numberColumns, type BlockColumn } from './block-columns';
import {
	readFeedback,
	readNumber,
	readPurpose,
	type CellFault,
	type CellReading
} from './read-cell';

export type ColumnFault = CellFault & { column: string };
export type ReadBlock = { place: ListPlace; number: number | null; block: BlockDraft };
export type BlockReading = { ok: true; read: ReadBlock } | { ok: false; faults: ColumnFault[] };

type Context = { draft: Pick<ProtocolDraft, 'arms' | 'visits'>; columns: readonly BlockColumn[] };

/** One row of texts as a block and its place; every cell that cannot be read is named. */
export function readBlockCells(cells: Record<string, string>, context: Context): BlockReading {
	const faults: ColumnFault[] = [];
	function take<Value>(column: string, reading: CellReading<Value>): Value | null {
		if (reading.ok) return reading.value;
		faults.push({ column, message: reading.message, suggestion: reading.suggestion });
		return null;
	}
	const { draft, columns } = context;
	const number = (key: string) => {
		const column = columns.find((one) => one.key === key);
		return column ? take(key, readNumber(cells[key] ?? '', column)) : null;
	};
	const visit = take('visit', readVisit(cells['visit'] ?? '', draft));
	const arm = take('arm', readArm(cells['arm'] ?? '', draft));
	const place = take('block', readPlace(cells['block'] ?? ''));
	const purpose = take('purpose', readPurpose(cells['purpose'] ?? ''));
	const block = blockDraftSchema.parse({
		purpose: purpose ?? 'practice',
		trials: null,
		...Object.fromEntries(numberColumns.map(({ key }) => [key, number(key)])),
		instruction: (cells['instruction'] ?? '').trim().slice(0, 40),
		feedback: take('feedback', readFeedback(cells['feedback'] ?? '')),
		shift: readPair(number('shiftFrom'), number('shiftTo')),
		region: readRegion(columns, number)
	});
	if (purpose === 'rest') block.trials = 0;
	if (faults.length > 0 || visit === null) return { ok: false, faults };
	return { ok: true, read: { place: { visit, arm }, number: place, block } };
}

function readPair(from: number | null, to: number | null): BlockDraft['shift'] {
	return from === null && to === null ? null : { from, to };
}

function readRegion(
	columns: readonly BlockColumn[],
	number: (key: string) => number | null
): BlockDraft['region'] {
	const read = (stem: string) =>
		columns.filter(({ key }) => key.startsWith(stem)).map(({ key }) => number(key));
	const [center, halfWidth] = [read('center'), read('halfWidth')];
	return [...center, ...halfWidth].every((value) => value === null) ? null : { center, halfWidth };
}

/** By name, or by its number in the order of visits. */
function readVisit(text: string, { visits }: Context['draft']): CellReading<number> {
	const names = visits.map((visit, index) => visitName(visit, index));
	const wanted = text.trim().toLowerCase();
	const found = names.findIndex((name) => name.toLowerCase() === wanted);
	if (found >= 0) return { ok: true, value: found };
	if (/^\d+$/.test(wanted) && visits[Number(wanted) - 1]) {
		return { ok: true, value: Number(wanted) - 1 };
	}
	const message = wanted === '' ? 'say which visit' : 'no visit is called so; add it first';
	return { ok: false, message, suggestion: nearestWord(text, names) };
}

/** By name or key; nothing means every arm. */
function readArm(text: string, { arms }: Context['draft']): CellReading<string | null> {
	const wanted = text.trim().toLowerCase();
	if (['', 'all', 'every', 'all arms', everyArm].includes(wanted)) return { ok: true, value: null };
	const found = arms.find(
		({ key, name }) => key === wanted || name.trim().toLowerCase() === wanted
	);
	if (found) return { ok: true, value: found.key };
	const names = [...arms.map(({ key, name }) => name || key), everyArm];
	const message = 'no arm is called so; add it first';
	return { ok: false, message, suggestion: nearestWord(text, names) };
}

function readPlace(text: string): CellReading<number | null> {
	const typed = text.trim();
	if (typed === '') return { ok: true, value: null };
	if (/^\d+$/.test(typed) && Number(typed) > 0) return { ok: true, value: Number(typed) };
	return { ok: false, message: 'write the block’s number in its visit', suggestion: null };
}
