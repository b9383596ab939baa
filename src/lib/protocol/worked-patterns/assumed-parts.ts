import type { AnalysisDraft } from '../draft-parts';
import { emptyComparison } from '../pattern-parts';
import type { ProtocolDraft } from '../protocol-draft';

/** What stands as the source of a number that no lab has measured yet. */
export const ASSUMED =
	'Assumption of the pattern, to be replaced by the lab’s own source (a pilot, a study, the smallest effect that would matter).';

/** A comparison of two arms that can be frozen as it opens; every number says that it is assumed. */
export function assumeComparison(
	outcome: string,
	[armA, armB]: readonly [string, string],
	{ effectD, peoplePerArm }: { effectD: number; peoplePerArm: number }
): ProtocolDraft['comparison'] {
	return {
		...emptyComparison(),
		...{ outcome, armA, armB, effectD, peoplePerArm },
		effectSource: ASSUMED,
		peopleLostSource: ASSUMED,
		effectLostSource: ASSUMED
	};
}

/** Events that the record tags by itself, each with the strategy of the treatment as it was given. */
export function treatmentPolicy(
	...events: AnalysisDraft['estimand']['events'][number]['event'][]
): AnalysisDraft['estimand']['events'] {
	return events.map((event) => ({ event, strategy: 'treatment-policy' }));
}

/** Short texts that are read to people, the same to every arm. */
export const oneInstruction: ProtocolDraft['instructions'] = [
	{
		version: '1',
		text: 'Slide the puck so that it stops on the line. Rest whenever you want; say at once if anything hurts.'
	}
];
