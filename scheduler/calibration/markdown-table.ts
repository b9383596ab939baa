/** A table for the docs: one heading a column, then rows of text and rounded numbers. */
export function writeTable(
	headings: readonly string[],
	rows: readonly (readonly (string | number)[])[]
): string {
	const line = (cells: readonly (string | number)[]) => `| ${cells.join(' | ')} |`;
	return [line(headings), line(headings.map(() => '---')), ...rows.map(line)].join('\n');
}

/** A share of so many runs with its standard error, as .xxx ± .xxx. */
export function writeShare(count: number, runs: number): string {
	const share = count / runs;
	const digits = (value: number) => value.toFixed(3).replace(/^0/, '');
	return `${digits(share)} ± ${digits(Math.sqrt((share * (1 - share)) / runs))}`;
}
