import { drawUniform } from '../random/random-stream.ts';
import type { CryptographicStream } from './cryptographic-stream.ts';

/**
 * True with the probability p, to within 2^-53.
 * @throws RangeError when p is not in 0 to 1
 */
export function drawWithProbability(stream: CryptographicStream, p: number): boolean {
	if (!(p >= 0 && p <= 1)) throw new RangeError(`p must lie in 0 to 1, got ${p}`);
	return drawUniform(stream) < p;
}
