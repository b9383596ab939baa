import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { deriveEntry, type PermutedBlockScheme } from './permuted-blocks.ts';
import { listStrata, nameStratum } from './strata.ts';

const factors = [
	{ name: 'hand', values: ['left', 'right'] },
	{ name: 'site', values: ['A', 'B', 'C'] }
];

describe('strata', () => {
	it('are all combinations, each with a name of its own', () => {
		const names = listStrata(factors);
		expect(new Set(names).size).toBe(6);
		expect(names).toContain(nameStratum(factors, { site: 'C', hand: 'left' }));
		expect(nameStratum([], {})).toBe('[]');
	});

	it('keep arms within half a block of each other, in every stratum at any time', () => {
		const scheme: PermutedBlockScheme = {
			...{
				arms: [
					{ id: 'a', weight: 1 },
					{ id: 'b', weight: 1 }
				],
				blockSizes: [4, 6]
			}
		};
		const person = fc.record({
			hand: fc.constantFrom('left', 'right'),
			site: fc.constantFrom('A', 'B', 'C')
		});
		const property = fc.property(
			fc.array(person, { maxLength: 60 }),
			fc.string(),
			(people, seed) => {
				const openStream = (name: string) => {
					let counter = 0;
					return {
						nextUint32: () => {
							counter += 1;
							const text = `${seed}|${name}|${counter}`;
							return createHash('sha256').update(text).digest().readUInt32BE(0);
						}
					};
				};
				const taken = new Map<string, number>();
				const difference = new Map<string, number>();
				for (const values of people) {
					const stratum = nameStratum(factors, values);
					const index = taken.get(stratum) ?? 0;
					taken.set(stratum, index + 1);
					const { armId } = deriveEntry({ scheme, stratum, index, openStream });
					const now = (difference.get(stratum) ?? 0) + (armId === 'a' ? 1 : -1);
					difference.set(stratum, now);
					expect(Math.abs(now)).toBeLessThanOrEqual(3);
				}
			}
		);
		fc.assert(property, { seed: 131, numRuns: 30 });
	});

	it.each([
		['a missing value', { hand: 'left' }],
		['an unknown value', { hand: 'both', site: 'A' }],
		['an unknown factor', { hand: 'left', site: 'A', age: 'old' }]
	])('refuse %s', (_, values) => {
		expect(() => nameStratum(factors, values)).toThrow(RangeError);
	});

	it('refuse a factor with one value, and two of one name', () => {
		expect(() => listStrata([{ name: 'x', values: ['a'] }])).toThrow(RangeError);
		const x = { name: 'x', values: ['a', 'b'] };
		expect(() => listStrata([x, x])).toThrow(RangeError);
	});
});
