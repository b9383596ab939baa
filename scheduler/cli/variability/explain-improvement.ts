import { z } from 'zod';
import type { Matrix } from '../../linear-algebra/vector.ts';
import { createTask } from '../../tasks/create-task.ts';
import { computeCost, type Task } from '../../tasks/task.ts';
import { drawResamples, shapeOf, summariseReplicates } from '../../variability/block-bootstrap.ts';
import { compareCoordinates } from '../../variability/compare-coordinates.ts';
import type { CoordinateSystem } from '../../variability/coordinates.ts';
import {
	decomposeImprovement,
	type DecompositionResult
} from '../../variability/decompose-improvement.ts';
import { computeCovariationIndex, type Cost } from '../../variability/mean-cost.ts';
import { computeVariabilityCosts } from '../../variability/variability-costs.ts';
import {
	failureSchema,
	intervalResultSchema,
	measureNames,
	numbers,
	requireWidths,
	trialsSchema,
	type IntervalRequest
} from './block-inputs.ts';
import { comparisonSchema, createFirstSystem, createSecondSystem } from './second-system.ts';

export const decomposeInputSchema = z
	.strictObject({
		...measureNames,
		before: trialsSchema,
		after: trialsSchema,
		undefinedCost: z
			.number()
			.nonnegative()
			.optional()
			.describe('cost of an execution without a result, in the unit of the result')
	})
	.superRefine((input, context) =>
		requireWidths(input, { before: input.before, after: input.after }, context)
	);

const parts = z.strictObject({ tolerance: z.number(), noise: z.number() });
const costs = z.union([
	z.strictObject({
		ok: z.literal(true),
		...{ mean: z.number(), tolerance: z.number(), noise: z.number(), covariation: z.number() },
		...{ bestShift: numbers, bestScale: z.number(), isPairingExact: z.boolean() }
	}),
	failureSchema
]);
const index = z.union([
	z.strictObject({
		ok: z.literal(true),
		...{ index: z.number(), resultVariance: z.number(), freeVariance: z.number() }
	}),
	failureSchema
]);
const forEachPart = <S extends z.ZodType>(schema: S) =>
	z.strictObject({ tolerance: schema, noise: schema, covariation: schema, total: schema });

export const decompositionSchema = z.union([
	z.strictObject({
		ok: z.literal(true),
		unit: z.string(),
		decomposition: z.strictObject({
			...{ before: z.number(), after: z.number(), beforeFree: z.number(), afterFree: z.number() },
			...{ shifted: z.number(), respread: z.number(), shiftFirst: parts, spreadFirst: parts },
			...{ shapley: parts, range: z.number(), covariation: z.number(), total: z.number() },
			standardError: z.number()
		}),
		/** Average of both orders. null: not asked for, or a block shorter than a run. */
		intervals: forEachPart(intervalResultSchema).nullable(),
		secondSystem: forEachPart(comparisonSchema),
		costs: z.strictObject({ before: costs, after: costs }),
		covariationIndex: z.strictObject({ before: index, after: index })
	}),
	failureSchema
]);

type Part = 'tolerance' | 'noise' | 'covariation' | 'total';

/** What made one block better than another: place, spread, covariation; and what each could still gain. */
export function explainImprovement(input: z.output<typeof decomposeInputSchema>) {
	const task = createTask(input.task);
	const blocks = [input.before, input.after];
	const cost = costOf(task, input.undefinedCost);
	const found = decompose(blocks, cost);
	if (!found.ok) return found;
	const { ok, ...decomposition } = found;
	const ranges = task.variables.map(({ min, max }) => ({ min, max }));
	const pair = <T>(measure: (trials: Matrix) => T) => ({
		before: measure(input.before),
		after: measure(input.after)
	});
	return {
		...{ ok, unit: task.resultUnit, decomposition },
		intervals: drawIntervals(found, blocks, cost, input.interval),
		secondSystem: compareParts(task, blocks, cost, input.second),
		costs: pair((trials) => computeVariabilityCosts(trials, cost, { ranges })),
		covariationIndex: pair((trials) => computeCovariationIndex(trials, (x) => task.evaluate(x)))
	};
}

/** Size of the miss, as people see it. */
function costOf(task: Task, undefinedCost = Number.NaN): Cost {
	return (execution) => computeCost(task, execution) ?? undefinedCost;
}

function decompose([before = [], after = []]: readonly Matrix[], cost: Cost): DecompositionResult {
	return decomposeImprovement(before, after, cost);
}

function readPart(found: DecompositionResult & { ok: true }, part: Part): number {
	if (part === 'covariation' || part === 'total') return found[part];
	return found.shapley[part];
}

function drawIntervals(
	found: DecompositionResult & { ok: true },
	blocks: readonly Matrix[],
	cost: Cost,
	{ replicates, blockLength, seed, level }: IntervalRequest
) {
	if (replicates === 0 || blocks.some((trials) => trials.length < blockLength)) return null;
	const drawn = Array.from(
		drawResamples({ blocks, seed, blockLength }, 0, replicates),
		(resample) => decompose(resample, cost)
	);
	return mapParts((part) =>
		summariseReplicates(
			readPart(found, part),
			drawn.map((replicate) => (replicate.ok ? readPart(replicate, part) : null)),
			{ level, ...shapeOf({ blocks, blockLength }) }
		)
	);
}

function compareParts(
	task: Task,
	blocks: readonly Matrix[],
	cost: Cost,
	wanted: z.output<typeof decomposeInputSchema>['second']
) {
	const systems = {
		first: createFirstSystem(task),
		second: createSecondSystem(task, blocks, wanted)
	};
	const cache = new Map<CoordinateSystem, DecompositionResult>();
	const decomposeIn = (written: readonly Matrix[], system: CoordinateSystem) => {
		const known = cache.get(system) ?? decompose(written, (z) => cost(system.toUnits(z)));
		cache.set(system, known);
		return known;
	};
	return mapParts((part) =>
		compareCoordinates({
			...{ blocks, ...systems },
			measure: (written, system) => {
				const there = decomposeIn(written, system);
				return there.ok ? { ok: true, value: readPart(there, part) } : there;
			}
		})
	);
}

function mapParts<T>(read: (part: Part) => T): Record<Part, T> {
	return {
		...{ tolerance: read('tolerance'), noise: read('noise') },
		...{ covariation: read('covariation'), total: read('total') }
	};
}
