import { computeNormalCdf, computeNormalQuantile } from '../statistics/normal.ts';
import { requireCount, requireTest } from './t-power.ts';

export type ProportionDesign = {
	p1: number;
	p2: number;
	n1: number;
	n2: number;
	alpha: number;
	sides: 1 | 2;
	/** `normal`: the score test with pooled variance. `arcsine`: after the arcsine transform. */
	method: 'normal' | 'arcsine';
	/** Two-sided: whether a result the wrong way counts as well. True when left out. */
	strict?: boolean;
};

/**
 * Power of the comparison of two shares.
 *
 * Shapes: numbers in, number out. Units: shares 0 to 1. One-sided: only p2 above p1 is looked for
 * when p2 > p1, only below otherwise.
 * Method: normal approximation with the pooled variance under no difference, or normal on
 * 2 arcsin √p. Source: method sheet E; R power.prop.test and pwr::pwr.2p.test.
 * Accuracy: absolute 1e-12 of the formula; tests/reference/power-sheet.test.ts, case
 * power-proportions-normal.
 * @throws RangeError when a share is not strictly between 0 and 1 or a group is empty
 * @example computeProportionPower({ p1: 0.5, p2: 0.75, n1: 50, n2: 50, alpha: 0.05, sides: 2,
 *   method: 'normal' }) // 0.7402
 */
export function computeProportionPower(design: ProportionDesign): number {
	const { p1, p2, n1, n2, alpha, sides, method, strict = true } = design;
	requireTest(alpha, sides);
	requireCount('n1', n1, 1);
	requireCount('n2', n2, 1);
	if (!(p1 > 0 && p1 < 1 && p2 > 0 && p2 < 1))
		throw new RangeError(`p1 and p2 must lie between 0 and 1, got ${p1} and ${p2}`);
	const z = -computeNormalQuantile(alpha / sides);
	const { size, stretch } = method === 'normal' ? measureNormal(design) : measureArcsine(design);
	const right = computeNormalCdf(size - z * stretch);
	if (sides === 1 || !strict) return right;
	return Math.min(1, right + computeNormalCdf(-size - z * stretch));
}

/** The difference in its standard errors, and the critical value's stretch. */
function measureNormal({ p1, p2, n1, n2 }: ProportionDesign) {
	const pooled = (n1 * p1 + n2 * p2) / (n1 + n2);
	const ifEqual = Math.sqrt(pooled * (1 - pooled) * (1 / n1 + 1 / n2));
	const asPlanned = Math.sqrt((p1 * (1 - p1)) / n1 + (p2 * (1 - p2)) / n2);
	return { size: Math.abs(p2 - p1) / asPlanned, stretch: ifEqual / asPlanned };
}

function measureArcsine({ p1, p2, n1, n2 }: ProportionDesign) {
	const h = 2 * Math.abs(Math.asin(Math.sqrt(p1)) - Math.asin(Math.sqrt(p2)));
	return { size: h * Math.sqrt((n1 * n2) / (n1 + n2)), stretch: 1 };
}
