import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { checkRows } from './check-rows';
import type { Roster } from './roster';
import { proposeMapping } from './propose-mapping';
import { readTable } from './read-table';

const folder = new URL('../../../../tests/data/uploads/', import.meta.url);
type Entry = {
	file: string;
	verdict: string;
	alternative_verdict?: string;
	message_must_mention: string[];
	roster?: string[];
};
const manifest = JSON.parse(readFileSync(new URL('manifest.json', folder), 'utf8')) as {
	files: Entry[];
};

function rosterOf(codes: string[]): Roster {
	const blocks = Array.from({ length: 40 }, (_, index) => ({ number: index + 1, trials: 20 }));
	const visit = { bookedOn: '2027-03-11', hasStarted: true, blocks, stored: [] };
	const visits = new Map(Array.from({ length: 40 }, (_, index) => [index + 1, visit] as const));
	const variables = [
		{ name: 'angle', unit: 'deg', min: -360, max: 360 },
		{ name: 'velocity', unit: 'm/s', min: -50, max: 50 }
	];
	return { people: new Map(codes.map((code) => [code, visits])), variables };
}

/** The words a person would read: a refusal, or all faults and warnings. */
function readOut(entry: Entry): { isRefused: boolean; words: string } {
	const read = readTable(readFileSync(new URL(`files/${entry.file}`, folder)));
	if (!read.ok) return { isRefused: true, words: read.message };
	const roster = rosterOf(entry.roster ?? ['P01', 'P02', 'P03', 'P04', 'P05', 'P06']);
	const checked = checkRows(read.table, proposeMapping(read.table, roster.variables), roster);
	const words = [...checked.faults, ...checked.warnings]
		.map((problem) => problem.message)
		.join('\n');
	return { isRefused: checked.faults.length > 0, words };
}

describe('awkward trial files', () => {
	it('are all here', () => {
		expect(readdirSync(new URL('files/', folder)).sort()).toEqual(
			manifest.files.map((entry) => entry.file).sort()
		);
	});

	it.each(manifest.files)('$file ends in a plain answer', { timeout: 60_000 }, (entry) => {
		const { isRefused, words } = readOut(entry);
		if (isRefused) expect(words).not.toBe('');
		expect(words.length).toBeLessThan(60_000);
	});

	it.each(manifest.files.filter((entry) => entry.verdict === 'reject'))(
		'$file is refused and says why',
		(entry) => {
			const { isRefused, words } = readOut(entry);
			expect(isRefused).toBe(true);
			for (const word of entry.message_must_mention) expect(words).toContain(word);
		}
	);

	it.each([
		'01_clean.csv',
		'03_semicolon_decimal_comma.csv',
		'05_crlf.csv',
		'07_mixed_newlines_no_final_newline.csv',
		'11_units_in_header.csv',
		'23_comment_lines.csv'
	])('%s is accepted as it is', (file) => {
		const entry = manifest.files.find((candidate) => candidate.file === file);
		expect(entry && readOut(entry).isRefused).toBe(false);
	});
});
