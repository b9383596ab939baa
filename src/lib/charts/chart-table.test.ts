import { expect, it } from 'vitest';
import { toCsv } from './chart-table';

it('writes a table as RFC 4180 says', () => {
	const table = {
		columns: ['what', 'speed, m/s'],
		rows: [
			['a "b"', 2.1],
			['c\nd', -1]
		]
	};
	expect(toCsv(table)).toBe('what,"speed, m/s"\r\n"a ""b""",2.1\r\n"c\nd",-1\r\n');
});
