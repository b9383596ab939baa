import { describe, expect, it } from 'vitest';
import {
	computeBoundaries,
	computeClassicalBoundaries,
	computeCrossings,
	computeInflation
} from '../../scheduler/power/group-sequential.ts';

const alphaPerSide = 0.025;
const even = (count: number) => Array.from({ length: count }, (_, i) => (i + 1) / count);
const listZ = (kind: 'obrien-fleming' | 'pocock', information: readonly number[]) =>
	computeBoundaries({ spending: { kind }, alphaPerSide, information, sides: 2 });

// Method sheet E: recursive integration (Simpson, 4001 points), checked by multivariate normal
// integration; the values of K. Lan and D. DeMets.
describe('boundaries with error spending, two-sided 5 %', () => {
	it.each([
		['obrien-fleming', even(2), [2.9625880427, 1.9685956406]],
		[
			'obrien-fleming',
			even(5),
			[4.8768849488, 3.3570119216, 2.6802800645, 2.2898167677, 2.0310320433]
		],
		[
			'obrien-fleming',
			[0.3, 0.55, 0.8, 1],
			[3.9285725426, 2.8078768564, 2.2760980828, 2.029244619]
		],
		['pocock', even(3), [2.2794282389, 2.2949111324, 2.2959383587]],
		['pocock', even(5), [2.438, 2.4268, 2.4102, 2.3966, 2.386]]
	] as const)('%s at %j', (kind, information, wanted) => {
		const digits = wanted[0] === 2.438 ? 6e-5 : 2e-6;
		listZ(kind, information).forEach(({ z }, i) => {
			expect(Math.abs(z - (wanted[i] ?? NaN))).toBeLessThan(digits);
		});
	});

	it('spends what the function says: cumulative alpha of five looks', () => {
		const wanted = [5.388712629e-7, 3.9415175669e-4, 3.80806331099e-3, 0.01221179034645, 0.025];
		listZ('obrien-fleming', even(5)).forEach(({ spentSoFar }, i) => {
			expect(spentSoFar / (wanted[i] ?? NaN)).toBeCloseTo(1, 8);
		});
	});
});

describe('classical designs of five looks (Pocock 1977; O’Brien and Fleming 1979)', () => {
	const design = { lookCount: 5, alphaPerSide, sides: 2 } as const;

	it('have the published constants 2.4132 and 2.0401', () => {
		const pocock = computeClassicalBoundaries({ ...design, shape: 0 });
		expect(pocock.every((z) => Math.abs(z - 2.4132) < 6e-5)).toBe(true);
		const fleming = computeClassicalBoundaries({ ...design, shape: 0.5 });
		fleming.forEach((z, i) => {
			expect(Math.abs(z - 2.0401 * Math.sqrt(5 / (i + 1)))).toBeLessThan(1.3e-4);
		});
	});

	it('need 1.0265 times the people of a single look (power .9)', () => {
		const z = computeClassicalBoundaries({ ...design, shape: 0.5 });
		const { factor } = computeInflation({
			...{ z, information: even(5), sides: 2, alphaPerSide, power: 0.9 }
		});
		expect(Math.abs(factor - 1.0265)).toBeLessThan(6e-4);
	});
});

describe('crossing probabilities', () => {
	it('of a single look are the plain normal power', () => {
		const got = computeCrossings({ z: [1.96], information: [1], sides: 2, drift: 3 });
		// SciPy 1.17.1 norm.sf(1.96 - 3), norm.cdf(-1.96 - 3).
		expect(got.above).toBeCloseTo(0.8508300496690187, 12);
		expect(got.below / 3.5246589817642376e-7).toBeCloseTo(1, 9);
	});

	it('of boundaries made for them are what was spent', () => {
		const information = [0.11, 0.12, 0.5, 0.9, 1];
		const z = listZ('pocock', information).map((look) => look.z);
		const { above, below } = computeCrossings({ z, information, sides: 2, drift: 0 });
		expect(above).toBeCloseTo(0.025, 9);
		expect(below).toBeCloseTo(0.025, 9);
	});
});
