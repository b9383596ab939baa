import { parse } from 'csv-parse/browser/esm/sync';

/** A column as text knows it: `names` are the heads by which it is known, in small letters. */
export type TextColumn<Key extends string> = {
	key: Key;
	label: string;
	names: readonly string[];
};
export type TextRow<Key extends string> = { line: number; cells: Record<Key, string> };
export type Separator = 'tab' | 'semicolon' | 'comma';
export type TableText<Key extends string> =
	| { ok: true; rows: TextRow<Key>[]; separator: Separator; ignoredColumns: string[] }
	| { ok: false; reason: 'nothing-pasted' | 'too-many-rows' };

const signs: Record<Separator, string> = { tab: '\t', semicolon: ';', comma: ',' };

/**
 * Splits pasted text into rows and cells: tabs, semicolons or commas, whichever the text uses. A
 * first row that names columns gives their order; without one the order of `columns` holds. `line`
 * counts the lines of the text, a header row included, as the person who pasted it counts.
 */
export function readTableText<Key extends string>(
	text: string,
	columns: readonly TextColumn<Key>[],
	mostRows: number
): TableText<Key> {
	const separator = findSeparator(text);
	const records = readRecords(text, separator);
	const header = readHeader(records[0]?.values ?? [], columns);
	const body = header ? records.slice(1) : records;
	if (body.length === 0) return { ok: false, reason: 'nothing-pasted' };
	if (body.length > mostRows) return { ok: false, reason: 'too-many-rows' };
	const order = header?.order ?? columns.map(({ key }) => key);
	const rows = body.map(({ line, values }) => ({ line, cells: fillCells(values, order, columns) }));
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

type Header<Key> = { order: (Key | null)[]; ignored: string[] };

function readHeader<Key extends string>(
	values: readonly string[],
	columns: readonly TextColumn<Key>[]
): Header<Key> | null {
	const order = values.map((value) => {
		const wanted = value.toLowerCase();
		return columns.find(({ names }) => names.includes(wanted))?.key ?? null;
	});
	if (order.filter(Boolean).length < 2) return null;
	return { order, ignored: values.filter((value, index) => value !== '' && !order[index]) };
}

function fillCells<Key extends string>(
	values: readonly string[],
	order: readonly (Key | null)[],
	columns: readonly TextColumn<Key>[]
): Record<Key, string> {
	const cells = Object.fromEntries(columns.map(({ key }) => [key, ''])) as Record<Key, string>;
	order.forEach((column, index) => {
		if (column) cells[column] = values[index] ?? '';
	});
	return cells;
}
