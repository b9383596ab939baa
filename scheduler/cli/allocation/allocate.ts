import { createHash, createHmac, randomBytes } from 'node:crypto';
import { z } from 'zod';
import { drawByBiasedCoin } from '../../allocation/biased-coin.ts';
import { isRevealed, writeCommitmentText } from '../../allocation/commitment.ts';
import type { OpenStream } from '../../allocation/cryptographic-stream.ts';
import { createKeyedStream } from '../../allocation/keyed-stream.ts';
import { drawMinimisedArm, IMBALANCE_MEASURES } from '../../allocation/minimisation.ts';
import { deriveEntry } from '../../allocation/permuted-blocks.ts';
import { nameStratum } from '../../allocation/strata.ts';

const hex = z
	.string()
	.regex(/^[0-9a-fA-F]{64}$/, 'must be 64 hexadecimal digits')
	.describe('32 bytes in hexadecimal');
const traits = z.record(z.string(), z.string());

export const allocateInputSchema = z.discriminatedUnion('method', [
	z.strictObject({
		method: z.literal('blocks'),
		seedHex: hex,
		arms: z
			.array(z.strictObject({ id: z.string(), weight: z.number().int().min(1).default(1) }))
			.min(2),
		blockSizes: z.array(z.number().int().min(1)).min(1),
		factors: z
			.array(z.strictObject({ name: z.string(), values: z.array(z.string()).min(2) }))
			.default([])
			.describe('what the strata are made of; none: one sequence for all'),
		people: z
			.array(traits)
			.max(5000)
			.describe('in the order of their allocation: a value for each factor')
	}),
	z.strictObject({
		method: z.literal('minimisation'),
		seedHex: hex,
		armCount: z.number().int().min(2),
		previous: z.array(z.strictObject({ traits, arm: z.number().int().min(0) })),
		newcomer: traits,
		weights: z.record(z.string(), z.number().min(0)),
		measure: z.enum(IMBALANCE_MEASURES).default('range'),
		certainty: z.number().min(0).max(1).default(0.8),
		ratio: z.array(z.number().int().min(1)).optional()
	}),
	z.strictObject({
		method: z.literal('biased-coin'),
		seedHex: hex,
		counts: z.tuple([z.number().int().min(0), z.number().int().min(0)]),
		p: z
			.number()
			.min(0.5)
			.max(1)
			.default(2 / 3)
	})
]);

const number = z.number();
export const allocateSchema = z.union([
	z.strictObject({
		entries: z.array(
			z.strictObject({
				stratum: z.string(),
				...{ armId: z.string(), blockNumber: number, blockSize: number, positionInBlock: number }
			})
		)
	}),
	z.strictObject({
		arm: number,
		...{ scores: z.array(number), preferred: z.array(number), followed: z.boolean() }
	}),
	z.strictObject({ arm: number })
]);

/** Arms from a sealed seed; the same seed and people always give the same arms. */
export function allocate(
	input: z.output<typeof allocateInputSchema>
): z.output<typeof allocateSchema> {
	const openStream = openFrom(input.seedHex);
	if (input.method === 'blocks') return { entries: listEntries(input, openStream) };
	if (input.method === 'minimisation') {
		const { ratio, ...request } = input;
		const stream = openStream(JSON.stringify(['minimisation', input.previous.length]));
		return drawMinimisedArm(ratio ? { ...request, ratio } : request, stream);
	}
	const [first, second] = input.counts;
	const stream = openStream(JSON.stringify(['biased-coin', first + second]));
	return { arm: drawByBiasedCoin(input, stream) };
}

function listEntries(
	{
		arms,
		blockSizes,
		factors,
		people
	}: Extract<z.output<typeof allocateInputSchema>, { method: 'blocks' }>,
	openStream: OpenStream
) {
	const taken = new Map<string, number>();
	return people.map((values) => {
		const stratum = factors.length === 0 ? 'all' : nameStratum(factors, values);
		const index = taken.get(stratum) ?? 0;
		taken.set(stratum, index + 1);
		return {
			stratum,
			...deriveEntry({ scheme: { arms, blockSizes }, stratum, index, openStream })
		};
	});
}

function openFrom(seedHex: string): OpenStream {
	const seed = Buffer.from(seedHex, 'hex');
	return (label) =>
		createKeyedStream(
			{
				authenticate: (message) => createHmac('sha256', seed).update(message).digest(),
				encode: (text) => Buffer.from(text, 'utf8')
			},
			label
		);
}

const secret = { seedHex: hex, nonceHex: hex };

export const sealInputSchema = z.strictObject({});
export const sealSchema = z.strictObject({ ...secret, commitment: hex });

/** A new secret from the operating system, and the commitment to publish before anybody is allocated. */
export function sealAllocation(): z.output<typeof sealSchema> {
	const [seedHex, nonceHex] = [randomBytes(32).toString('hex'), randomBytes(32).toString('hex')];
	return { seedHex, nonceHex, commitment: hash(writeCommitmentText({ seedHex, nonceHex })) };
}

export const revealInputSchema = z.strictObject({ commitment: hex, ...secret });
export const revealSchema = z.strictObject({ isRevealed: z.boolean() });

/** Whether a secret is the one that was committed to. */
export function revealAllocation({
	commitment,
	...given
}: z.output<typeof revealInputSchema>): z.output<typeof revealSchema> {
	return { isRevealed: isRevealed(commitment, given, hash) };
}

function hash(text: string): string {
	return createHash('sha256').update(text, 'utf8').digest('hex');
}
