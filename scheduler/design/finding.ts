import type { JsonObject } from '../policies/json-value.ts';
import type { Design } from './design.ts';
import type { Repair } from './repair.ts';

/** What the checker looks for, in the order in which its findings are listed. */
export const FINDING_CODES = [
	'no-baseline',
	'impossible-gap',
	'burden',
	'unequal-trials',
	'unequal-rest',
	'instruction-differs',
	'order-fixed',
	'few-trials',
	'noise-rule',
	'no-washout',
	'retention-early',
	'retention-disturbed'
] as const;
export type FindingCode = (typeof FINDING_CODES)[number];

/** Numbers count from 1, as people do; an arm is named by its key. */
export interface FindingPlace {
	readonly visit?: number;
	readonly arm?: string;
	readonly block?: number;
}

/** Something about a design that must be mended, or justified in writing, before it is frozen. */
export interface Finding {
	/** Code and place: the same finding keeps its key, so that a justification stays with it. */
	readonly key: string;
	readonly code: FindingCode;
	readonly place: FindingPlace;
	/** Where it is typed, as a path into the design: 'visits.3.blocks.1.trials'. */
	readonly field: string;
	readonly numbers: JsonObject;
	/** serious: the comparison or the result is at stake; minor: a reader will ask. */
	readonly severity: 'serious' | 'minor';
	readonly text: string;
	readonly repair?: Repair;
}

/** What a design is held against beside itself. */
export interface CheckContext {
	/** Rigs of the lab; empty: only the protocol's own limits count. */
	readonly rigs: readonly RigCapacity[];
}

export interface RigCapacity {
	readonly name: string;
	readonly minutesPerVisit: number;
	readonly trialsPerVisit: number;
}

export type Check = (design: Design, context: CheckContext) => Finding[];
