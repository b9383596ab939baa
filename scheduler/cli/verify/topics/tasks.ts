import { z } from 'zod';
import { compileDual } from '../../../tasks/formula/compile-formula.ts';
import { parseFormula } from '../../../tasks/formula/parse-formula.ts';
import { forInputs, type TopicGroup } from '../topic.ts';

/** Task models in check cases. */
export const TASK_TOPICS: TopicGroup = {
	'task-generic': forInputs(
		z.strictObject({ formula: z.string(), x: z.record(z.string(), z.number()) }),
		({ formula, x }) => {
			const names = Object.keys(x);
			const parsed = parseFormula(formula, names);
			if (!parsed.ok)
				throw new RangeError(`formula, character ${parsed.position + 1}: ${parsed.message}`);
			const { value, slopes } = compileDual(parsed.expression, names.length)(Object.values(x));
			return { value, gradient: slopes };
		}
	)
};
