import type { Matrix } from '../linear-algebra/vector.ts';
import { convertExecutions, type CoordinateSystem } from './coordinates.ts';

/** What is measured of trials written in one coordinate system. */
export type CoordinateMeasure<Reason extends string> = (
	blocks: readonly Matrix[],
	system: CoordinateSystem
) => { ok: true; value: number } | { ok: false; reason: Reason };

export interface CoordinateComparison {
	readonly first: { readonly system: string; readonly value: number };
	readonly second: { readonly system: string; readonly value: number };
	/** second / first; null when the first is 0. */
	readonly ratio: number | null;
	/** Whether the two differ in sign: then nothing may be concluded from the sign of either. */
	readonly hasSignFlip: boolean;
}

export type CoordinateComparisonResult<Reason extends string> =
	| ({ ok: true } & CoordinateComparison)
	| { ok: false; reason: Reason | 'not-writable'; system: string };

/**
 * The same measure in two declared coordinate systems, side by side.
 *
 * Shapes:  blocks (trials × d each) in task units.
 * Method:  all trials are written in each system, the measure is taken in both; ratio and change of sign.
 * Source:  method sheet B11 (rule 2 and 3); Sternad, Park, Müller & Hogan 2010, PLoS CB 6:e1000751;
 *          uncontrolled-manifold.test.ts.
 */
export function compareCoordinates<Reason extends string>(options: {
	blocks: readonly Matrix[];
	first: CoordinateSystem;
	second: CoordinateSystem;
	measure: CoordinateMeasure<Reason>;
}): CoordinateComparisonResult<Reason> {
	const first = measureIn(options.first, options);
	if (!first.ok) return { ...first, system: options.first.name };
	const second = measureIn(options.second, options);
	if (!second.ok) return { ...second, system: options.second.name };
	const [a, b] = [first.value, second.value];
	return {
		ok: true,
		first: { system: options.first.name, value: a },
		second: { system: options.second.name, value: b },
		ratio: a === 0 ? null : b / a,
		hasSignFlip: a * b < 0
	};
}

function measureIn<Reason extends string>(
	system: CoordinateSystem,
	{ blocks, measure }: { blocks: readonly Matrix[]; measure: CoordinateMeasure<Reason> }
): { ok: true; value: number } | { ok: false; reason: Reason | 'not-writable' } {
	const written = blocks.map((executions) => convertExecutions(executions, system));
	if (!written.every((executions) => executions !== null))
		return { ok: false, reason: 'not-writable' };
	return measure(written, system);
}
