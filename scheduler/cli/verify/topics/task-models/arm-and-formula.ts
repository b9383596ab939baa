import { z } from 'zod';
import { computeNullBasis } from '../../../../linear-algebra/null-basis.ts';
import { computeConditioning } from '../../../../tasks/conditioning.ts';
import { compileDual } from '../../../../tasks/formula/compile-formula.ts';
import { computeFormulaHessian } from '../../../../tasks/formula/formula-hessian.ts';
import { parseFormula } from '../../../../tasks/formula/parse-formula.ts';
import { computeArmPosture } from '../../../../tasks/models/arm.ts';
import { firstOf, forInputs, Judged } from '../../topic.ts';

const lengths = z.array(z.number().positive()).min(1);
const angles = z.array(z.number());
const RAD_PER_DEG = Math.PI / 180;

/** Cases of the planar arm. */
export const ARM_TOPIC = firstOf(
	forInputs(z.strictObject({ q_deg: angles, lengths }), ({ q_deg, lengths }) =>
		describePosture(
			lengths,
			q_deg.map((angle) => angle * RAD_PER_DEG)
		)
	),
	forInputs(z.strictObject({ q: angles, lengths }), ({ q, lengths }) =>
		describePosture(lengths, q)
	),
	forInputs(z.strictObject({ q_rad: angles, lengths }), ({ q_rad, lengths }) =>
		describePosture(lengths, q_rad)
	)
);

/** Cases of a formula with values for its names. */
export const FORMULA_TOPIC = forInputs(
	z.strictObject({ formula: z.string(), x: z.record(z.string(), z.number()) }),
	({ formula, x }) => {
		const names = Object.keys(x);
		const parsed = parseFormula(formula, names);
		if (!parsed.ok)
			throw new RangeError(`formula, character ${parsed.position + 1}: ${parsed.message}`);
		const at = Object.values(x);
		const { value, slopes } = compileDual(parsed.expression, names.length)(at);
		return { value, gradient: slopes, hessian: computeFormulaHessian(parsed.expression, at) };
	}
);

function describePosture(lengths: readonly number[], angles: readonly number[]) {
	if (angles.length !== lengths.length)
		throw new RangeError(`${angles.length} angles for ${lengths.length} links`);
	const { tip, jacobian } = computeArmPosture(lengths, angles);
	const rows = jacobian.map((values) => [...values]);
	const conditioning = computeConditioning(
		{ variableCount: angles.length, jacobian: () => rows },
		angles
	);
	const basis = computeNullBasis(rows);
	const [first] = basis ?? [];
	return {
		...{ x: tip[0], y: tip[1], position: tip, jacobian: rows },
		...{ singular_values: conditioning?.singularValues, rank: conditioning?.rank },
		...{ null_dimension: conditioning?.freeCount, singular: conditioning?.isSingular },
		null_vector: basis?.length === 1 ? new Judged(first, { isSignFree: true }) : undefined
	};
}
