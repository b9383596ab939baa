import { computeNormalQuantile, computeNormalSurvival } from '../statistics/normal.ts';

/** How fast the error rate may be spent as information comes in. */
export type Spending =
	| { kind: 'obrien-fleming' }
	| { kind: 'pocock' }
	/** alpha · t^exponent. */
	| { kind: 'power'; exponent: number };

/**
 * Error rate that may be spent up to a share of the information.
 *
 * Shapes: numbers in, number out. Units: probabilities; information as a share 0 to 1 of the plan.
 * Method: O'Brien-Fleming type 2 - 2 Φ(z_{α/2} / √t); Pocock type α ln(1 + (e - 1) t); power α t^ρ.
 * Source: K. Lan and D. DeMets, Biometrika 70 (1983); method sheet E.
 * Accuracy: relative 1e-12; tests/reference/group-sequential.test.ts.
 * @throws RangeError when alpha is not between 0 and 1 or the information is below 0
 * @example computeSpent({ kind: 'obrien-fleming' }, { alpha: 0.025, information: 0.5 }) // 0.0015253
 */
export function computeSpent(
	spending: Spending,
	{ alpha, information }: { alpha: number; information: number }
): number {
	if (!(alpha > 0 && alpha < 1)) throw new RangeError(`alpha must be in 0 to 1, got ${alpha}`);
	if (!(information >= 0))
		throw new RangeError(`information must be 0 or more, got ${information}`);
	const t = Math.min(1, information);
	if (t === 0) return 0;
	if (spending.kind === 'pocock') return alpha * Math.log1p((Math.E - 1) * t);
	if (spending.kind === 'power') return alpha * t ** requireExponent(spending.exponent);
	return 2 * computeNormalSurvival(-computeNormalQuantile(alpha / 2) / Math.sqrt(t));
}

function requireExponent(exponent: number): number {
	if (!(exponent > 0)) throw new RangeError(`exponent must be positive, got ${exponent}`);
	return exponent;
}
