import { describe, expect, it } from 'vitest';
import { placeOnTimeline, type TimelineQuestion } from './timeline';

const plan = [
	{ number: 1, kind: 'baseline' },
	{ number: 2, kind: 'practice' },
	{ number: 3, kind: 'practice' },
	{ number: 4, kind: 'retention' }
] as const;
const nobody = {
	consentedAtMs: null,
	baselinePassedAtMs: null,
	allocatedAtMs: null,
	completedAtMs: null,
	withdrawnAtMs: null,
	consent: null
};
const consented = { ...nobody, consentedAtMs: 1, consent: { textVersion: 'v3' } };
const allocated = { ...consented, baselinePassedAtMs: 2, allocatedAtMs: 3 };

function place(
	person: TimelineQuestion['person'],
	visits: TimelineQuestion['visits'] = [],
	armCount = 2
) {
	const { steps, at, words, hasLeft } = placeOnTimeline({ person, plan, armCount, visits });
	return { step: steps[at], words, hasLeft };
}
const booked = (...numbers: number[]) =>
	numbers.map((visitNumber) => ({ visitNumber, state: 'booked' as const }));
const attended = (...numbers: number[]) =>
	numbers.map((visitNumber) => ({ visitNumber, state: 'attended' as const }));

describe('placeOnTimeline', () => {
	it('goes from enrolment through consent and baseline to allocation', () => {
		expect(place(nobody)).toMatchObject({ step: 'enrolled', words: 'enrolled' });
		expect(place(consented)).toMatchObject({ step: 'consented', words: 'consented v3' });
		expect(place(consented, booked(1, 2))).toMatchObject({ words: 'baseline booked' });
		expect(place(consented, attended(1))).toMatchObject({ words: 'baseline done' });
		const passed = { ...consented, baselinePassedAtMs: 2 };
		expect(place(passed, attended(1))).toMatchObject({
			step: 'baseline done',
			words: 'ready to be allocated'
		});
	});

	it('counts practice days by the next one, and ends with all visits done', () => {
		expect(place(allocated, attended(1))).toMatchObject({ step: 'allocated', words: 'day 1 of 2' });
		expect(place(allocated, attended(1, 2))).toMatchObject({
			step: 'practice',
			words: 'day 2 of 2'
		});
		expect(place(allocated, attended(1, 2, 3))).toMatchObject({ words: 'retention due' });
		expect(place(allocated, attended(1, 2, 3, 4))).toMatchObject({ step: 'completed' });
	});

	it('keeps the step at which somebody left', () => {
		const left = { ...allocated, withdrawnAtMs: 9 };
		expect(place(left, attended(1, 2))).toEqual({
			step: 'practice',
			words: 'withdrawn',
			hasLeft: true
		});
	});

	it('leaves out steps that a study does not have', () => {
		const single = placeOnTimeline({
			person: consented,
			plan: [{ number: 1, kind: 'baseline' }],
			armCount: 1,
			visits: []
		});
		expect(single.steps).toEqual([
			'enrolled',
			'consented',
			'baseline booked',
			'baseline done',
			'completed'
		]);
	});
});
