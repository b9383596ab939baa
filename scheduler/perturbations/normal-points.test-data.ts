import { drawNormal } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';

/** Pseudo-random normal points, for checks against the engine's own fixed point set. */
export function drawNormalPoints(count: number, d: number): number[][] {
	const stream = createSeededStream(12);
	return Array.from({ length: count }, () => Array.from({ length: d }, () => drawNormal(stream)));
}
