import { describe, expect, it } from 'vitest';
import { describeAvailability, readAvailability } from './availability';

const window = (weekday: number, from: number, to: number) => ({
	weekday,
	fromMinute: from * 60,
	toMinute: to * 60
});

function windowsOf(text: string) {
	const answer = readAvailability(text);
	if (!answer.ok) throw new Error(answer.message);
	return answer.windows;
}

describe('readAvailability', () => {
	it('takes any and nothing as no limit', () => {
		for (const text of ['any', ' Any time ', '']) expect(windowsOf(text)).toEqual([]);
	});

	it('takes a part of the day as that part of all seven days', () => {
		expect(windowsOf('mornings')).toEqual([1, 2, 3, 4, 5, 6, 7].map((day) => window(day, 6, 13)));
		expect(windowsOf('afternoon')).toHaveLength(7);
	});

	it('takes runs and lists of days with hours', () => {
		expect(windowsOf('Mon-Wed 9-12, Fri 14:00-18:00')).toEqual([
			window(1, 9, 12),
			window(2, 9, 12),
			window(3, 9, 12),
			window(5, 14, 18)
		]);
		expect(windowsOf('Mon, Thu 9–12')).toEqual([window(1, 9, 12), window(4, 9, 12)]);
	});

	it('takes days with a part of the day', () => {
		expect(windowsOf('Mon-Fri mornings')).toEqual([1, 2, 3, 4, 5].map((d) => window(d, 6, 13)));
		expect(windowsOf('tuesday afternoons; wed 9.30-11')).toEqual([
			window(2, 12, 19),
			window(3, 9.5, 11)
		]);
	});

	it('says what it cannot read', () => {
		const cases: [string, string][] = [
			['mondayish 9-12', '“mondayish” is no weekday'],
			['Mon 12-9', 'ends before it begins'],
			['Mon 9-25', 'is no stretch of hours'],
			['Mon', 'the hours are missing'],
			['whenever', 'is no weekday']
		];
		for (const [text, part] of cases) {
			const answer = readAvailability(text);
			expect(answer.ok ? 'read' : answer.message).toContain(part);
		}
	});
});

describe('describeAvailability', () => {
	it('writes what readAvailability reads back', () => {
		const texts = [
			'any',
			'mornings',
			'Mon-Wed 09:00-12:30, Fri 14:00-18:00',
			'Mon, Thu afternoons'
		];
		for (const text of texts) expect(describeAvailability(windowsOf(text))).toBe(text);
	});
});
