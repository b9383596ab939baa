import { z } from 'zod';
import { readNumbers, type Datasets } from '../../topic.ts';

export const numbers = z.array(z.number());
export const matrix = z.array(numbers);

/** What sums of squares are divided by; nothing else is offered. */
export const divisor = z.literal('n-1').default('n-1');

/** Names with which a case tells its trials: a dataset, all of its columns or some. */
export const trialNames = { dataset: z.string(), columns: z.array(z.string()).optional() };

export function readTrials(
	{ dataset, columns }: { dataset: string; columns?: string[] | undefined },
	datasets: Datasets
): number[][] {
	return readNumbers(datasets, dataset, columns);
}

/**
 * The answer of something that data may make impossible.
 * @throws {RangeError} there is none; the message is its reason
 */
export function requireOk<T extends { ok: boolean }>(result: T): Extract<T, { ok: true }> {
	if (isOk(result)) return result;
	throw new RangeError('reason' in result ? String(result.reason) : 'no result');
}

function isOk<T extends { ok: boolean }>(result: T): result is Extract<T, { ok: true }> {
	return result.ok;
}
