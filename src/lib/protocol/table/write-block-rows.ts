import { writeTableText } from '../../ui/write-table-text';
import type { BlockRef } from '../edit/block-lists';
import type { ProtocolDraft } from '../protocol-draft';
import { listBlockColumns, usualColumns, type BlockColumn } from './block-columns';
import { listBlockRows, type BlockRow } from './list-block-rows';

/** The columns in which something stands, and those that every protocol needs. */
export function columnsInUse(
	columns: readonly BlockColumn[],
	rows: readonly BlockRow[]
): BlockColumn[] {
	const used = new Set(rows.flatMap(({ cells }) => Object.keys(cells).filter((key) => cells[key])));
	return columns.filter(({ key }) => usualColumns.has(key) || used.has(key));
}

/** Rows as text for a spreadsheet, with a head. */
export function writeBlockRows(columns: readonly BlockColumn[], rows: readonly BlockRow[]): string {
	const empty = Object.fromEntries(columns.map(({ key }) => [key, '']));
	return writeTableText(
		columns,
		rows.map(({ cells }) => ({ ...empty, ...cells }))
	);
}

/** Single blocks as text for a spreadsheet. */
export function writeBlocks(draft: ProtocolDraft, refs: readonly BlockRef[]): string {
	const wanted = new Set(refs.map(({ visit, arm, block }) => `${visit}:${arm ?? ''}:${block}`));
	const rows = listBlockRows(draft).filter(({ id }) => wanted.has(id));
	return writeBlockRows(columnsInUse(listBlockColumns(draft.task), rows), rows);
}
