import { betraysArm } from '$lib/intake/column-use';
import type { Table } from './read-table';

/**
 * The bytes to keep of a file. A file without a telling column is kept as it came. One with a column
 * that may name an arm is written anew without it, row by row, so that the arm is never stored.
 */
export function stripColumns(bytes: Uint8Array, table: Table): Uint8Array {
	const kept = table.header
		.map((name, index) => (betraysArm(name) ? -1 : index))
		.filter((i) => i >= 0);
	if (kept.length === table.header.length) return bytes;
	const write = (fields: string[]) =>
		kept.map((index) => quote(fields[index] ?? '', table.delimiter)).join(table.delimiter);
	const lines = [write(table.header), ...table.rows.map((row) => write(row.fields))];
	return new TextEncoder().encode(`${lines.join('\n')}\n`);
}

function quote(field: string, delimiter: string): string {
	const needsQuotes = field.includes(delimiter) || /["\n]/.test(field);
	return needsQuotes ? `"${field.replaceAll('"', '""')}"` : field;
}
