import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { z } from 'zod';
import { COMMANDS } from './commands.ts';

/** Sound inputs of the commands; every number in them is put to the extreme. */
const file = new URL('../../tests/reference/data/command-inputs.json', import.meta.url);
const sound = z
	.record(z.string(), z.array(z.unknown()).min(1))
	.parse(JSON.parse(readFileSync(file, 'utf8')));

const extremes = [
	...[0, -0, 1, -1, 0.5, 2, 3, 1e-3, 1e3],
	...[5e-324, 1e-300, 1e-17, 1e-8, 1 - 2 ** -53, 1 + 2 ** -52],
	...[1e8, 1e15, 2 ** 53, 1e100, 1e300, Number.MAX_VALUE, -1e-300, -1e8, -1e300]
];
const change = fc.record({
	seed: fc.nat(),
	leaves: fc.array(fc.record({ at: fc.nat(), value: fc.constantFrom(...extremes) }), {
		minLength: 1,
		maxLength: 3
	})
});

type Place = { holder: Record<string, unknown>; key: string };

function listNumbers(value: unknown): Place[] {
	if (typeof value !== 'object' || value === null) return [];
	const holder = value as Record<string, unknown>;
	return Object.entries(holder).flatMap(([key, inner]) =>
		typeof inner === 'number' ? [{ holder, key }] : listNumbers(inner)
	);
}

/** Paths of numbers in an answer that are none. */
function listFaults(value: unknown, path = ''): string[] {
	if (typeof value === 'number') return Number.isFinite(value) ? [] : [`${path} is ${value}`];
	if (typeof value !== 'object' || value === null) return [];
	return Object.entries(value).flatMap(([key, inner]) => listFaults(inner, `${path}.${key}`));
}

describe('with numbers at the extreme', () => {
	// Slow commands are asked as often as fits; the time limit only ends the asking.
	test.each(Object.keys(sound))(
		'%s answers with numbers, or refuses in words',
		{ timeout: 30_000 },
		(name) => {
			const inputs = sound[name] ?? [];
			fc.assert(
				fc.property(change, ({ seed, leaves }) => {
					const input = structuredClone(inputs[seed % inputs.length]);
					const numbers = listNumbers(input);
					for (const { at, value } of leaves) {
						const place = numbers[at % Math.max(1, numbers.length)];
						if (place) place.holder[place.key] = value;
					}
					expect(answerOf(name, input)).toEqual([]);
				}),
				{ seed: 20270310, numRuns: 40, endOnFailure: true, interruptAfterTimeLimit: 400 }
			);
		}
	);
});

function answerOf(name: string, input: unknown): string[] {
	try {
		return listFaults(COMMANDS[name]?.run(input));
	} catch (error) {
		if (error instanceof RangeError || error instanceof z.ZodError) return [];
		throw error;
	}
}
