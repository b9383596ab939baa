import { describe, expect, it } from 'vitest';
import { isInView, matchesCode, summariseDays, type PersonRow } from './people-list';

const row: PersonRow = {
	id: 'x',
	code: 'TW-017',
	timeline: { steps: ['enrolled'], at: 0, hasLeft: false, words: 'enrolled' },
	nextVisit: null,
	consent: null,
	isConsentOld: false,
	waits: null,
	consentToVisitDays: null,
	mayConsent: true,
	mayBook: false
};
const visit = {
	bookingId: 'b',
	label: 'Day 1',
	startMs: 1_000,
	rigName: 'Gull',
	isHere: false,
	answer: 'none' as const,
	isInvited: true
};

describe('views of the list of people', () => {
	it('count a visit within seven days as coming up', () => {
		const weekMs = 7 * 24 * 3_600_000;
		expect(isInView({ ...row, nextVisit: { ...visit, startMs: weekMs } }, 'coming', 0)).toBe(true);
		expect(isInView({ ...row, nextVisit: { ...visit, startMs: weekMs + 1 } }, 'coming', 0)).toBe(
			false
		);
		expect(isInView(row, 'coming', 0)).toBe(false);
	});

	it('miss an answer only of who was invited', () => {
		expect(isInView({ ...row, nextVisit: visit }, 'no-answer', 0)).toBe(true);
		expect(isInView({ ...row, nextVisit: { ...visit, isInvited: false } }, 'no-answer', 0)).toBe(
			false
		);
	});

	it('find a code by any part of it', () => {
		expect(matchesCode(row, ' 17')).toBe(true);
		expect(matchesCode(row, 'tw-0')).toBe(true);
		expect(matchesCode(row, '18')).toBe(false);
	});
});

describe('summariseDays', () => {
	it('gives the middle value and the longest wait', () => {
		expect(summariseDays([3, 9, 4])).toEqual({ median: 4, longest: 9 });
		expect(summariseDays([3, 9, 4, 6])).toEqual({ median: 5, longest: 9 });
		expect(summariseDays([])).toBeNull();
	});
});
