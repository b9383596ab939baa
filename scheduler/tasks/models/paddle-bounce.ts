import { entry, type Vector } from '../../linear-algebra/vector.ts';
import { createSingleResult, type ResultModel } from '../result-model.ts';
import type { PaddleBounceRecord } from './paddle-record.ts';

/**
 * Height of the next apex less the target: v⁺ = (1+ε)·v_p − ε·v⁻, apex = x_p + v⁺²/(2g).
 *
 * Units:   speeds m/s (up is positive, so the falling ball has v⁻ < 0), heights m.
 * Source:  method sheet A2. The manifold is the plane (1+ε)·v_p − ε·v⁻ = √(2g(h − x_p)); with two
 *          variables a line.
 */
export function createPaddleBounce(record: PaddleBounceRecord): ResultModel {
	const { restitution: e, targetHeight, g } = record;
	const hasHeight = record.variables.length > 2;
	const heightAt = (x: Vector) => (hasHeight ? entry(x, 2) : record.impactHeight);
	const launch = (x: Vector) => (1 + e) * entry(x, 1) - e * entry(x, 0);
	return createSingleResult({
		evaluate: (x) => {
			const v = launch(x);
			return v > 0 ? heightAt(x) + v ** 2 / (2 * g) - targetHeight : Number.NaN;
		},
		gradient: (x) => {
			const v = launch(x);
			const slopes = [(-e * v) / g, ((1 + e) * v) / g];
			return hasHeight ? [...slopes, 1] : slopes;
		},
		findInvalid: (x) => (launch(x) > 0 ? null : 'ball-not-rising')
	});
}
