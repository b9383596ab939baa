import { expect, test } from 'vitest';
import { formatVariableLimits, parseVariableLimits } from './variable-limits';

test('each line is a variable and its largest value', () => {
	const text = 'release_speed_m_s 1.8\npeak_force_n = 20';
	const found = parseVariableLimits(text);
	expect(found).toEqual({
		ok: true,
		variableMax: { release_speed_m_s: 1.8, peak_force_n: 20 }
	});
	expect(found.ok && formatVariableLimits(found.variableMax)).toBe(
		'release_speed_m_s 1.8\npeak_force_n 20'
	);
});

test('no line is no limit', () => {
	expect(parseVariableLimits(' \n')).toEqual({ ok: true, variableMax: {} });
});

test.each(['speed', 'speed fast', 'speed -1', 'speed 0', '2 speed', 'speed 1 2', 'speed NaN'])(
	'%j is refused by its line',
	(line) => {
		const found = parseVariableLimits(line);
		expect(!found.ok && found.faults[0]?.line).toBe(1);
	}
);

test('a variable has one limit', () => {
	const found = parseVariableLimits('speed 1\nspeed 2');
	expect(!found.ok && found.faults).toEqual([
		{ line: 2, message: 'speed has a limit already, further up.' }
	]);
});
