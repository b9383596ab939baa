import { describe, expect, it } from 'vitest';
import { checkRows } from './check-rows';
import type { Roster, RosterVisit } from './roster';
import { judgeQuality } from './judge-quality';
import { proposeMapping } from './propose-mapping';
import { readTable } from './read-table';
import { stripColumns } from './strip-columns';

const variables = [
	{ name: 'release_speed', unit: 'm/s', min: 0.5, max: 4 },
	{ name: 'release_position', unit: 'm', min: -0.4, max: 1.1 }
];
const visit = (more: Partial<RosterVisit> = {}): RosterVisit => ({
	bookedOn: '2027-03-11',
	hasStarted: true,
	blocks: [{ number: 1, trials: 2 }],
	stored: [],
	...more
});
const roster = (visits: [number, RosterVisit][] = [[1, visit()]]): Roster => ({
	people: new Map([['TW-001', new Map(visits)]]),
	variables
});
const header = 'participant,day,block,trial,release_speed_m_s,release_position_m';

function check(text: string, who: Roster = roster()) {
	const read = readTable(new TextEncoder().encode(text));
	if (!read.ok) throw new Error(read.message);
	return checkRows(read.table, proposeMapping(read.table, variables), who);
}
const codes = (problems: { code: string }[]) => problems.map((problem) => problem.code);

describe('checkRows', () => {
	it('reads trials by participant, visit and block', () => {
		const checked = check(`${header}\nTW-001,1,1,1,2.5,0.2\nTW-001,1,1,2,2.4,0.3\n`);
		expect(checked.faults).toEqual([]);
		expect(checked.blocks[0]?.trials).toEqual([
			{ number: 1, execution: [2.5, 0.2] },
			{ number: 2, execution: [2.4, 0.3] }
		]);
	});

	it('stores nothing of a file with one fault, and names its line and column', () => {
		const checked = check(`${header}\nTW-001,1,1,1,2.5,0.2\nTW-001,1,1,2,fast,0.3\n`);
		expect(checked.blocks).toEqual([]);
		expect(checked.faults[0]).toMatchObject({
			code: 'not-a-number',
			line: 3,
			column: 'release_speed_m_s'
		});
	});

	it.each([
		['an unknown code', `TW-999,1,1,1,2.5,0.2`, roster(), 'unknown-participant'],
		['a visit the protocol does not have', `TW-001,4,1,1,2.5,0.2`, roster(), 'unknown-visit'],
		[
			'a visit without a booking',
			`TW-001,1,1,1,2.5,0.2`,
			roster([[1, visit({ bookedOn: null })]]),
			'visit-not-booked'
		],
		[
			'a visit that has not begun',
			`TW-001,1,1,1,2.5,0.2`,
			roster([[1, visit({ hasStarted: false })]]),
			'visit-not-yet'
		],
		[
			'a block that is stored already',
			`TW-001,1,1,1,2.5,0.2`,
			roster([[1, visit({ stored: [1] })]]),
			'block-stored'
		],
		['a block the visit does not have', `TW-001,1,7,1,2.5,0.2`, roster(), 'unknown-block'],
		['a trial number that is no count', `TW-001,1,1,x,2.5,0.2`, roster(), 'not-a-count'],
		['a row with too few fields', `TW-001,1,1,1,2.5`, roster(), 'too-few-fields']
	])('refuses %s', (_, row, who, code) => {
		expect(codes(check(`${header}\n${row}\n`, who).faults)).toContain(code);
	});

	it('refuses a row dated on another day than the visit', () => {
		const text = `${header},date\nTW-001,1,1,1,2.5,0.2,2027-03-12\n`;
		expect(check(text).faults[0]).toMatchObject({ code: 'wrong-date', line: 2, column: 'date' });
	});

	it('keeps blanks as blanks and counts them', () => {
		const checked = check(`${header}\nTW-001,1,1,1,2.5,\nTW-001,1,1,2,2.4,0.3\n`);
		expect(checked.blocks[0]?.trials[0]?.execution).toEqual([2.5, null]);
		expect(checked.blankCounts).toEqual({ release_position: 1 });
	});

	it('turns another unit into the task’s unit and says so', () => {
		const text =
			'participant,day,block,trial,release_speed (cm/s),release_position [m]\nTW-001,1,1,1,250,0.2\n';
		const checked = check(text);
		expect(checked.blocks[0]?.trials[0]?.execution).toEqual([2.5, 0.2]);
		expect(codes(checked.warnings)).toContain('unit-converted');
	});

	it('reads semicolons with decimal commas', () => {
		const text = `${header.replaceAll(',', ';')}\nTW-001;1;1;1;2,5;0,2\n`;
		expect(check(text).blocks[0]?.trials[0]?.execution).toEqual([2.5, 0.2]);
	});

	it('needs no visit column in a study of one visit', () => {
		const checked = check(`${header.replace('day,', '')}\nTW-001,1,1,2.5,0.2\n`);
		expect(checked.faults).toEqual([]);
		expect(checked.blocks[0]?.visitNumber).toBe(1);
	});

	it('asks for the visit column in a study of several', () => {
		const two = roster([
			[1, visit()],
			[2, visit()]
		]);
		const text = `${header.replace('day,', '')}\nTW-001,1,1,2.5,0.2\n`;
		expect(codes(check(text, two).faults)).toEqual(['column-missing']);
	});

	it('refuses the same trial twice', () => {
		const row = 'TW-001,1,1,1,2.5,0.2';
		expect(codes(check(`${header}\n${row}\n${row}\n`).faults)).toContain('trial-twice');
	});
});

describe('a column that may name the arm', () => {
	const text = `participant,Group,day,block,trial,release_speed_m_s,release_position_m\nTW-001,secret-arm,1,1,1,2.5,0.2\n`;
	const bytes = new TextEncoder().encode(text);

	it('is ignored, with a word about it', () => {
		const checked = check(text);
		expect(checked.faults).toEqual([]);
		expect(codes(checked.warnings)).toContain('arm-column-ignored');
	});

	it('is not in the bytes that are kept', () => {
		const read = readTable(bytes);
		if (!read.ok) throw new Error(read.message);
		const kept = new TextDecoder().decode(stripColumns(bytes, read.table));
		expect(kept).not.toContain('secret-arm');
		expect(kept.split('\n')[1]).toBe('TW-001,1,1,1,2.5,0.2');
	});

	it('leaves other files byte for byte as they came', () => {
		const plain = new TextEncoder().encode(`${header}\r\nTW-001,1,1,1,2.5,0.2\r\n`);
		const read = readTable(plain);
		if (!read.ok) throw new Error(read.message);
		expect(stripColumns(plain, read.table)).toBe(plain);
	});
});

describe('judgeQuality', () => {
	const block = (trials: [number | null, number | null][]) => ({
		code: 'TW-001',
		visitNumber: 1,
		blockNumber: 1,
		plannedTrialCount: 4,
		trials: trials.map((execution, index) => ({ number: index + 1, execution }))
	});

	it('is green for a whole block inside the ranges', () => {
		const whole = block([
			[2.5, 0.2],
			[2.4, 0.3],
			[2.6, 0.1],
			[2.5, 0.25]
		]);
		expect(judgeQuality(whole, variables)).toEqual({ verdict: 'green', codes: [] });
	});

	it('is red when a sensor is stuck', () => {
		const stuck = block([
			[2.5, 0.2],
			[2.5, 0.3],
			[2.5, 0.1],
			[2.5, 0.25]
		]);
		expect(judgeQuality(stuck, variables)).toEqual({ verdict: 'red', codes: ['stuck'] });
	});

	it('is red when less than half of the trials came', () => {
		expect(judgeQuality(block([[2.5, 0.2]]), variables).verdict).toBe('red');
	});

	it('is red when a fifth and more is out of range', () => {
		const out = block([
			[9, 0.2],
			[2.4, 0.3],
			[2.6, 0.1],
			[2.5, 0.25]
		]);
		expect(judgeQuality(out, variables)).toEqual({ verdict: 'red', codes: ['out-of-range'] });
	});
});
