import { describe, expect, it } from 'vitest';
import { checkCells, findEmailFault } from './check-cells';
import { emptyCells } from './enrolment-columns';

const defaults = { zone: 'Europe/Lisbon', language: 'en' };
const cells = { ...emptyCells, name: 'Ines Invented', email: 'ines@mail.example' };

describe('checkCells', () => {
	it('fills empty language, zone and availability with the lab’s own', () => {
		expect(checkCells(cells, defaults)).toEqual({
			ok: true,
			person: {
				name: 'Ines Invented',
				email: 'ines@mail.example',
				phone: '',
				language: 'en',
				zone: 'Europe/Lisbon',
				availability: [],
				code: ''
			}
		});
	});

	it('keeps a code that the lab gave, and refuses what is none', () => {
		const kept = checkCells({ ...cells, code: ' Q11 ' }, defaults);
		expect(kept.ok && kept.person.code).toBe('Q11');
		const refused = checkCells({ ...cells, code: 'a code' }, defaults);
		expect(refused.ok ? [] : refused.faults.map((fault) => fault.columnLabel)).toEqual(['code']);
	});

	it('names every fault of a row with its column', () => {
		const answer = checkCells(
			{ ...cells, name: ' ', email: 'tess@mail', zone: 'Lisboa', language: 'klingon', phone: 'x' },
			defaults
		);
		const faults = answer.ok ? [] : answer.faults;
		expect(faults.map((fault) => [fault.columnNumber, fault.columnLabel])).toEqual([
			[1, 'name'],
			[2, 'e-mail'],
			[3, 'language'],
			[4, 'time zone'],
			[6, 'phone']
		]);
	});

	it('suggests the zone that was probably meant', () => {
		const answer = checkCells({ ...cells, zone: 'Lisboa' }, defaults);
		expect(answer).toMatchObject({
			ok: false,
			faults: [{ column: 'zone', value: 'Lisboa', suggestion: 'Europe/Lisbon' }]
		});
	});
});

describe('findEmailFault', () => {
	it('accepts ordinary and international addresses', () => {
		for (const email of ['a@b.example', 'x.y+tag@mail.example', 'jürgen@köln.example']) {
			expect(findEmailFault(email)).toBeNull();
		}
	});

	it('says what is missing or wrong', () => {
		const cases: [string, string][] = [
			['', 'is empty'],
			['tess.fictional@mail', 'nothing after “mail”, such as .example'],
			['tess', 'has no @'],
			['a@b@c.example', 'more than one @'],
			['@mail.example', 'nothing before the @'],
			['a@', 'nothing after the @'],
			['a b@mail.example', 'a space inside'],
			['a@mail..example', 'two dots'],
			['a<b@mail.example', 'a sign that no address has'],
			['a@-mail.example', 'a sign that no address has']
		];
		for (const [email, part] of cases) expect(findEmailFault(email)).toContain(part);
	});
});
