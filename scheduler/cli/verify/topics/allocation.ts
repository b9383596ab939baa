import { z } from 'zod';
import { computeImbalances } from '../../../allocation/biased-coin.ts';
import { computeGuessing } from '../../../allocation/guessing.ts';
import { listPreferred, scoreArms } from '../../../allocation/minimisation.ts';
import { buildWilliamsSquare, countOrders } from '../../../allocation/williams-square.ts';
import { firstOf, forInputs, HOW_CHECKED, type TopicGroup } from '../topic.ts';

const williams = forInputs(z.strictObject({ treatments: z.number().int() }), ({ treatments }) => {
	const sequences = buildWilliamsSquare(treatments);
	const { follows, places } = countOrders(sequences);
	const pairs = follows.flatMap((row, a) => row.filter((_, b) => a !== b));
	return {
		sequences: sequences.length,
		...{ each_pair_follows: sameOf(pairs), each_position_count: sameOf(places.flat()) },
		// The sentence of the case says what the counts above check.
		...{ example: sequences, property: HOW_CHECKED }
	};
});

/** The one value of a list, or null when it has several. */
function sameOf(values: readonly number[]): number | null {
	const [first] = values;
	return first !== undefined && values.every((value) => value === first) ? first : null;
}

const guessing = forInputs(
	z.strictObject({ block_size: z.number().int(), arms: z.number().int().min(2) }),
	({ block_size, arms }) => {
		if (block_size % arms !== 0)
			throw new RangeError(`a block of ${block_size} does not hold ${arms} arms evenly`);
		const got = computeGuessing(new Array<number>(arms).fill(block_size / arms));
		return {
			...{ distinct_blocks: got.arrangementCount, expected_correct_guesses: got.expectedCorrect },
			...{ formula_excess: got.excess, max_imbalance_inside_block: got.largestImbalance }
		};
	}
);

const biasedCoin = forInputs(z.strictObject({ p: z.number(), n: z.number().int() }), ({ p, n }) => {
	const { probabilities, expected } = computeImbalances({ p, n });
	const possible = probabilities.flatMap((chance, d) =>
		(d + n) % 2 === 0 ? [[String(d), chance] as const] : []
	);
	return {
		...{ prob_balanced: probabilities[0] ?? 0, prob_abs_imbalance: Object.fromEntries(possible) },
		expected_abs_imbalance: expected,
		complete_randomisation_expected_abs: computeImbalances({ p: 0.5, n }).expected
	};
});

const person = z.record(z.string(), z.union([z.string(), z.number()]));
const minimisation = forInputs(
	z.strictObject({
		arms: z.number().int(),
		previous: z.array(person),
		new: person,
		weights: z.record(z.string(), z.number())
	}),
	({ arms, previous, new: newcomer, weights }) => {
		const asText = (traits: z.output<typeof person>) =>
			Object.fromEntries(Object.entries(traits).map(([name, value]) => [name, String(value)]));
		const request = {
			...{ armCount: arms, weights, newcomer: asText(newcomer) },
			previous: previous.map(({ arm, ...traits }) => ({ arm: Number(arm), traits: asText(traits) }))
		};
		const measures = ['range', 'variance', 'sd'] as const;
		const scores = measures.map(
			(measure) => [measure, scoreArms({ ...request, measure })] as const
		);
		const preferred = scores.map(([measure, list]) => [measure, listPreferred(list)]);
		return { ...Object.fromEntries(scores), preferred: Object.fromEntries(preferred) };
	}
);

/** Allocation in check cases. */
export const ALLOCATION_TOPICS: TopicGroup = {
	randomisation: firstOf(williams, guessing, biasedCoin, minimisation)
};
