import { parse } from 'csv-parse/sync';
import {
	emptyCells,
	enrolmentColumns,
	maxRowCount,
	type EnrolmentCells,
	type EnrolmentColumn
} from '$lib/people/enrolment-columns';

export type PastedRow = { line: number; cells: EnrolmentCells };
export type PastedRows =
	| { ok: true; rows: PastedRow[]; separator: Separator; ignoredColumns: string[] }
	| { ok: false; reason: 'nothing-pasted' | 'too-many-rows' };
export type Separator = 'tab' | 'semicolon' | 'comma';

const signs: Record<Separator, string> = { tab: '\t', semicolon: ';', comma: ',' };

/**
 * Splits pasted text into rows and cells: tabs, semicolons or commas, whichever the text uses. A
 * first row that names columns gives their order; without one the usual order holds. `line` counts
 * the lines of the text, a header row included, as the person who pasted it counts.
 */
export function splitPastedRows(text: string): PastedRows {
	const separator = findSeparator(text);
	const records = readRecords(text, separator);
	const header = readHeader(records[0]?.values ?? []);
	const body = header ? records.slice(1) : records;
	if (body.length === 0) return { ok: false, reason: 'nothing-pasted' };
	if (body.length > maxRowCount) return { ok: false, reason: 'too-many-rows' };
	const order = header?.order ?? enrolmentColumns.map(({ key }) => key);
	const rows = body.map(({ line, values }) => ({ line, cells: fillCells(values, order) }));
	return { ok: true, rows, separator, ignoredColumns: header?.ignored ?? [] };
}

function findSeparator(text: string): Separator {
	if (text.includes('\t')) return 'tab';
	const [first = ''] = text.trimStart().split('\n');
	return first.includes(';') ? 'semicolon' : 'comma';
}

type Line = { line: number; values: string[] };

/** Quoted cells may hold the separator and line ends; what cannot be read as quoted stays as typed. */
function readRecords(text: string, separator: Separator): Line[] {
	const options = {
		delimiter: signs[separator],
		relax_column_count: true,
		relax_quotes: true,
		skip_empty_lines: false,
		bom: true,
		info: true
	} as const;
	const read = (quote: '"' | null) =>
		(
			parse(text, { ...options, quote }) as unknown as {
				record: string[];
				info: { lines: number };
			}[]
		)
			.map(({ record, info }) => ({ line: info.lines, values: record.map((cell) => cell.trim()) }))
			.filter(({ values }) => values.some((cell) => cell !== ''));
	try {
		return read('"');
	} catch {
		return read(null);
	}
}

type Header = { order: (EnrolmentColumn | null)[]; ignored: string[] };

function readHeader(values: readonly string[]): Header | null {
	const order = values.map((value) => findColumn(value));
	if (order.filter(Boolean).length < 2) return null;
	return { order, ignored: values.filter((value, index) => value !== '' && !order[index]) };
}

function findColumn(value: string): EnrolmentColumn | null {
	const wanted = value.toLowerCase();
	const column = enrolmentColumns.find(({ names }) =>
		(names as readonly string[]).includes(wanted)
	);
	return column?.key ?? null;
}

function fillCells(values: readonly string[], order: readonly (EnrolmentColumn | null)[]) {
	const cells: EnrolmentCells = { ...emptyCells };
	order.forEach((column, index) => {
		if (column) cells[column] = values[index] ?? '';
	});
	return cells;
}
