import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { drawMinimisedArm, listPreferred, scoreArms, type Traits } from './minimisation.ts';

/** SHA-256 of seed and counter: a stand-in for the sealed stream. */
function openStream(seed: string) {
	let counter = 0;
	return {
		nextUint32: () => {
			counter += 1;
			return createHash('sha256').update(`${seed}|${counter}`).digest().readUInt32BE(0);
		}
	};
}

const trait = fc.record({
	sex: fc.constantFrom('F', 'M'),
	age: fc.constantFrom('young', 'old'),
	site: fc.constantFrom('A', 'B', 'C')
});
const weights = { sex: 1, age: 1, site: 2 };

describe('minimisation', () => {
	const rows = [
		['F', 'young', 'A', 0],
		['M', 'young', 'B', 1],
		['F', 'old', 'A', 1],
		['F', 'young', 'B', 0],
		['M', 'old', 'A', 0],
		['F', 'young', 'A', 2],
		['M', 'old', 'B', 1]
	] as const;
	const previous = rows.map(([sex, age, site, arm]) => ({ traits: { sex, age, site }, arm }));
	const request = {
		...{ armCount: 3, previous, newcomer: { sex: 'F', age: 'young', site: 'A' }, weights }
	};

	// Pocock and Simon 1975, counted by hand: F .. A of arm 0 has 2 3, 2 3, 2 3 and so on.
	it.each([
		['range', [8, 4, 4]],
		['variance', [16 / 3, 4 / 3, 4 / 3]],
		['sd', [8 / Math.sqrt(3), 4 / Math.sqrt(3), 4 / Math.sqrt(3)]]
	] as const)('scores by %s', (measure, wanted) => {
		const scores = scoreArms({ ...request, measure });
		scores.forEach((score, i) => expect(score).toBeCloseTo(wanted[i] ?? NaN, 12));
		expect(listPreferred(scores)).toEqual([1, 2]);
	});

	it('follows the preferred arms with its certainty and draws ties fairly', () => {
		const stream = openStream('ties');
		const counts = [0, 0, 0];
		for (let i = 0; i < 4000; i += 1) {
			const { arm } = drawMinimisedArm({ ...request, measure: 'range', certainty: 0.8 }, stream);
			counts[arm] = (counts[arm] ?? 0) + 1;
		}
		// Four standard errors around .2, .4, .4 of 4000.
		expect(Math.abs((counts[0] ?? 0) - 800)).toBeLessThan(102);
		expect(Math.abs((counts[1] ?? 0) - 1600)).toBeLessThan(124);
	});

	it('with certainty 1 keeps every factor closely balanced, whatever people come', () => {
		const property = fc.property(
			fc.array(trait, { maxLength: 60 }),
			fc.string(),
			(people, seed) => {
				const stream = openStream(seed);
				const allocated: { traits: Traits; arm: number }[] = [];
				for (const newcomer of people) {
					const { arm } = drawMinimisedArm(
						{
							...{ armCount: 2, previous: allocated, newcomer, weights: { sex: 1 } },
							...{ measure: 'range', certainty: 1 }
						},
						stream
					);
					allocated.push({ traits: newcomer, arm });
				}
				for (const sex of ['F', 'M']) {
					const arms = allocated.filter(({ traits }) => traits.sex === sex).map(({ arm }) => arm);
					const ones = arms.filter((arm) => arm === 1).length;
					expect(Math.abs(arms.length - 2 * ones)).toBeLessThanOrEqual(1);
				}
			}
		);
		fc.assert(property, { seed: 121, numRuns: 60 });
	});

	it('of the first person is a fair draw, and a ratio is followed', () => {
		const stream = openStream('first');
		const newcomer = { sex: 'F' };
		const first = {
			...{ armCount: 2, previous: [], newcomer, weights: { sex: 1 } },
			...{ measure: 'range' as const, certainty: 0.8 }
		};
		let ones = 0;
		for (let i = 0; i < 4000; i += 1) ones += drawMinimisedArm(first, stream).arm;
		expect(Math.abs(ones - 2000)).toBeLessThan(127);
		const people: { traits: Traits; arm: number }[] = [];
		for (let i = 0; i < 90; i += 1) {
			const request = { ...first, previous: people, ratio: [2, 1], certainty: 1 };
			people.push({ traits: newcomer, arm: drawMinimisedArm(request, stream).arm });
		}
		expect(Math.abs(people.filter(({ arm }) => arm === 0).length - 60)).toBeLessThanOrEqual(1);
	});

	it.each([
		['a missing value', { newcomer: { sex: 'F', age: 'young' } }],
		['an unknown arm', { previous: [{ traits: request.newcomer, arm: 3 }] }],
		['one arm', { armCount: 1 }],
		['a negative weight', { weights: { sex: -1 } }],
		['no factor', { weights: {} }],
		['a short ratio', { ratio: [1, 1] }]
	])('refuses %s', (_, part) => {
		expect(() => scoreArms({ ...request, measure: 'range', ...part })).toThrow(RangeError);
	});
});
