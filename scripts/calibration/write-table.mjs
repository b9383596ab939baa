/** A Markdown table. */
export function writeTable(head, rows) {
	const line = (cells) => `| ${cells.join(' | ')} |`;
	return [line(head), line(head.map(() => '---')), ...rows.map(line)].join('\n');
}
