import { expect, it } from 'vitest';
import { computeSamplePower } from './sample-power';

// SciPy's noncentral t with 58 and 52 degrees of freedom, both tails: 30 a group at d = 0.8 and what
// is left of them, 27 at d = 0.68.
it('agrees with SciPy for the design of the front page', () => {
	const { planned, withLosses } = computeSamplePower();
	expect(planned).toBeCloseTo(0.8614225, 6);
	expect(withLosses).toBeCloseTo(0.6887005, 6);
});
