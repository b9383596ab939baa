import { describe, expect, it } from 'vitest';
import { isValidZone, suggestZone, zoneNames } from './is-valid-zone';

describe('zone names', () => {
	it.each(['UTC', 'Europe/Lisbon', 'Asia/Kolkata', 'America/Argentina/Buenos_Aires', 'Etc/GMT+5'])(
		'%s is a zone',
		(zone) => expect(isValidZone(zone)).toBe(true)
	);

	it.each(['', 'Lisboa', 'Europe/Lisboa', '+01:00', 'CET', 'EST', 'europe', 'Europe/Lisbon\n'])(
		'"%s" is not a zone',
		(zone) => expect(isValidZone(zone)).toBe(false)
	);

	it.each([
		['Lisboa', 'Europe/Lisbon'],
		['Europe/Lisboa', 'Europe/Lisbon'],
		['lisbon', 'Europe/Lisbon'],
		['Zürich', 'Europe/Zurich'],
		['Munich', 'Europe/Berlin'],
		['new york', 'America/New_York'],
		['Calcuta', 'Asia/Calcutta'],
		['CET', 'Europe/Berlin']
	])('"%s" is taken for %s', (typed, zone) => expect(suggestZone(typed)).toBe(zone));

	it('suggests nothing when nothing is near', () => {
		expect(suggestZone('the office upstairs')).toBeUndefined();
		expect(suggestZone('  ')).toBeUndefined();
	});

	it('lists only names that it accepts itself', () => {
		expect(zoneNames().every(isValidZone)).toBe(true);
		expect(zoneNames()).toEqual(expect.arrayContaining(['Europe/Lisbon', 'Asia/Kolkata', 'UTC']));
	});
});
