import { describe, expect, it } from 'vitest';
import { splitPastedRows } from './split-pasted-rows';

function rowsOf(text: string) {
	const found = splitPastedRows(text);
	if (!found.ok) throw new Error(found.reason);
	return found;
}

describe('splitPastedRows', () => {
	it('reads tabs, semicolons and commas alike', () => {
		const lines = ['Ines Invented', 'ines@mail.example', 'pt', 'Europe/Lisbon', 'mornings'];
		for (const [separator, sign] of [
			['tab', '\t'],
			['semicolon', ';'],
			['comma', ',']
		] as const) {
			const found = rowsOf(`${lines.join(sign)}\r\n${lines.join(sign)}\r\n`);
			expect(found.separator).toBe(separator);
			expect(found.rows.map((row) => row.line)).toEqual([1, 2]);
			expect(found.rows[1]?.cells).toEqual({
				name: 'Ines Invented',
				email: 'ines@mail.example',
				language: 'pt',
				zone: 'Europe/Lisbon',
				availability: 'mornings',
				phone: '',
				code: ''
			});
		}
	});

	it('follows a header row and names the columns it does not know', () => {
		const found = rowsOf('E-Mail\tName\tShoe size\na@b.example\tA\t43\n');
		expect(found.rows).toEqual([
			expect.objectContaining({
				line: 2,
				cells: expect.objectContaining({ name: 'A', email: 'a@b.example', zone: '' })
			})
		]);
		expect(found.ignoredColumns).toEqual(['Shoe size']);
	});

	it('counts lines as pasted, blank ones included', () => {
		const found = rowsOf('A,a@b.example\n\n\nB,b@b.example\n');
		expect(found.rows.map((row) => row.line)).toEqual([1, 4]);
	});

	it('keeps a separator inside quotes', () => {
		const [row] = rowsOf('A,a@b.example,en,Europe/Lisbon,"Mon 9-12, Wed 9-12"').rows;
		expect(row?.cells.availability).toBe('Mon 9-12, Wed 9-12');
	});

	it('does not lose a row to an unclosed quote', () => {
		expect(rowsOf('"A,a@b.example\nB,b@b.example').rows).toHaveLength(2);
	});

	it('refuses nothing and more than 500 rows', () => {
		expect(splitPastedRows(' \n ')).toEqual({ ok: false, reason: 'nothing-pasted' });
		expect(splitPastedRows('name\te-mail\n')).toEqual({ ok: false, reason: 'nothing-pasted' });
		const many = 'A,a@b.example\n'.repeat(501);
		expect(splitPastedRows(many)).toEqual({ ok: false, reason: 'too-many-rows' });
	});
});
