/** The table behind a picture: the same numbers, for reading and for saving. */
export interface ChartTable {
	readonly columns: readonly string[];
	readonly rows: readonly (readonly (string | number)[])[];
}

/** The table as CSV (RFC 4180): comma, CRLF, quotes where needed. */
export function toCsv({ columns, rows }: ChartTable): string {
	const line = (cells: readonly (string | number)[]) => cells.map(quote).join(',');
	return [columns, ...rows].map(line).join('\r\n') + '\r\n';
}

function quote(cell: string | number): string {
	const text = String(cell);
	return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
