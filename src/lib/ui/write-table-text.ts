import type { TextColumn } from './table-text';

/** Rows as tab-separated text with a head, for a spreadsheet. */
export function writeTableText<Key extends string>(
	columns: readonly TextColumn<Key>[],
	rows: readonly Record<Key, string>[]
): string {
	const quote = (cell: string) =>
		/[\t\r\n"]/.test(cell) ? `"${cell.replaceAll('"', '""')}"` : cell;
	const lines = [
		columns.map(({ label }) => label),
		...rows.map((row) => columns.map(({ key }) => row[key]))
	];
	return lines.map((cells) => cells.map(quote).join('\t')).join('\n');
}
