import { z } from 'zod';
import { computeImbalances } from '../../allocation/biased-coin.ts';
import { computeGuessing } from '../../allocation/guessing.ts';
import { buildWilliamsSquare, countOrders } from '../../allocation/williams-square.ts';
import {
	allocate,
	allocateInputSchema,
	allocateSchema,
	revealAllocation,
	revealInputSchema,
	revealSchema,
	sealAllocation,
	sealInputSchema,
	sealSchema
} from '../allocation/allocate.ts';
import { command, type CommandGroup } from '../command.ts';

const counts = z.array(z.array(z.number()));
/** What can have been used of a block is gone through state by state. */
const STATES_MAX = 20_000;
const predictSchema = z.union([
	z.strictObject({
		places: z
			.array(z.number().int().min(1))
			.min(2)
			.refine((places) => places.reduce((product, n) => product * (n + 1), 1) <= STATES_MAX, {
				error: 'the block is too large to go through everything that can have been used of it'
			})
			.describe('places of each arm in one block')
	}),
	z.strictObject({
		p: z
			.number()
			.min(0.5)
			.max(1)
			.default(2 / 3),
		n: z.number().int().min(0).max(5000).describe('people, by a biased coin')
	})
]);

/** Allocation to arms on the command line. */
export const ALLOCATION_COMMANDS: CommandGroup = {
	allocate: command(
		'Arms from a sealed seed: blocks in strata, minimisation, biased coin',
		{ input: allocateInputSchema, output: allocateSchema },
		allocate
	),
	seal: command(
		'A new secret seed and the commitment to publish',
		{ input: sealInputSchema, output: sealSchema },
		sealAllocation
	),
	reveal: command(
		'Whether a secret is the one that was committed to',
		{ input: revealInputSchema, output: revealSchema },
		revealAllocation
	),
	'predict-allocation': command(
		'What can be guessed in a block, or how unequal arms become by a biased coin',
		{
			input: predictSchema,
			output: z.looseObject({})
		},
		(input) => ('places' in input ? computeGuessing(input.places) : computeImbalances(input))
	),
	orders: command(
		'Orders of treatments that balance what follows what (Williams squares)',
		{
			input: z.strictObject({ treatmentCount: z.number().int().min(2).max(200) }),
			output: z.strictObject({ sequences: counts, follows: counts, places: counts })
		},
		({ treatmentCount }) => {
			const sequences = buildWilliamsSquare(treatmentCount);
			return { sequences, ...countOrders(sequences) };
		}
	)
};
