import { parse } from 'csv-parse/sync';
import type { FileProblem } from '$lib/intake/column-use';
import { decodeBytes } from './decode-bytes';

export type TableRow = { line: number; fields: string[] };
export type Table = {
	header: string[];
	headerLine: number;
	rows: TableRow[];
	delimiter: string;
	decimalSign: '.' | ',';
	encoding: string;
	/** Comments, blanks, repeated headers: counted, never data. */
	ignoredLineCount: number;
	warnings: FileProblem[];
};
export type ReadTable = { ok: true; table: Table } | { ok: false; code: string; message: string };

const maxFieldLength = 10_000;
type RawRecord = { record: string[]; info: { lines: number } };

/** Reads a delimited text file of any lab's shape into a header and rows with their line numbers. */
export function readTable(bytes: Uint8Array): ReadTable {
	const decoded = decodeBytes(bytes);
	if (!decoded.ok) return decoded;
	const delimiter = findDelimiter(decoded.text);
	const parsed = splitRecords(decoded.text, delimiter);
	if (!parsed.ok) return parsed;
	const { header, headerLine, rows, ignoredLineCount, warnings } = sortLines(parsed.records);
	if (decoded.encoding !== 'utf-8') warnings.unshift(guessedEncoding(decoded.encoding));
	if (header.length === 0 || rows.length === 0) {
		return { ok: false, code: 'no-data', message: 'The file has a header but no data rows.' };
	}
	const decimalSign = findDecimalSign(rows, delimiter);
	const { encoding } = decoded;
	return {
		ok: true,
		table: {
			header,
			headerLine,
			rows,
			delimiter,
			decimalSign,
			encoding,
			ignoredLineCount,
			warnings
		}
	};
}

function guessedEncoding(encoding: string): FileProblem {
	const message = `The file is not UTF-8; it was read as ${encoding}. Check names with accents.`;
	return { code: 'encoding-guessed', line: null, column: null, message };
}

/** The sign that splits the first line that is no comment into most fields. */
function findDelimiter(text: string): string {
	const line =
		text.split(/\r\n|\r|\n/, 200).find((part) => part.trim() && !part.startsWith('#')) ?? '';
	const counts = [',', ';', '\t', '|'].map((sign) => ({ sign, count: line.split(sign).length }));
	return counts.reduce((best, next) => (next.count > best.count ? next : best)).sign;
}

function splitRecords(text: string, delimiter: string) {
	try {
		const records = parse(text.replace(/\r\n?/g, '\n'), {
			delimiter,
			bom: true,
			info: true,
			relax_column_count: true,
			relax_quotes: true,
			skip_empty_lines: false,
			record_delimiter: '\n',
			max_record_size: 4_000_000
		}) as unknown as RawRecord[];
		return { ok: true as const, records };
	} catch (error) {
		const line = (error as { lines?: number }).lines;
		const message = `The file could not be split into rows${line ? ` near line ${line}` : ''}: a quote is opened and not closed, or a row is too long.`;
		return { ok: false as const, code: 'broken-quotes', message };
	}
}

function sortLines(records: RawRecord[]) {
	const rows: TableRow[] = [];
	const warnings: FileProblem[] = [];
	let header: string[] = [];
	let headerLine = 0;
	let ignoredLineCount = 0;
	for (const { record, info } of records) {
		const fields = record.map((field) => field.trim());
		const extraLines = record.reduce((sum, field) => sum + countNewlines(field), 0);
		const line = info.lines - extraLines;
		if (fields.every((field) => field === '') || fields[0]?.startsWith('#')) ignoredLineCount += 1;
		else if (header.length === 0) [header, headerLine] = [fields, line];
		else if (fields.join('\u0000') === header.join('\u0000')) {
			ignoredLineCount += 1;
			const message = `Line ${line} repeats the header and was passed over.`;
			warnings.push({ code: 'repeated-header', line, column: null, message });
		} else rows.push({ line, fields });
	}
	return { header, headerLine, rows, ignoredLineCount, warnings };
}

function countNewlines(field: string): number {
	return field.split('\n').length - 1;
}

function findDecimalSign(rows: TableRow[], delimiter: string): '.' | ',' {
	if (delimiter === ',') return '.';
	const sample = rows.slice(0, 200).flatMap((row) => row.fields);
	const commas = sample.filter((field) => /^-?\d+,\d+$/.test(field)).length;
	const points = sample.filter((field) => /^-?\d+\.\d+$/.test(field)).length;
	return commas > points ? ',' : '.';
}

/** A field longer than any number or code can be. */
export function isTooLong(field: string): boolean {
	return field.length > maxFieldLength;
}
