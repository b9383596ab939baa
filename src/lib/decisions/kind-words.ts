import type { DecisionKind } from '$scheduler/policies/policy-memory';

/** Kinds of block in plain words, every one that the engine can name. */
const words: Readonly<Record<DecisionKind, string>> = {
	baseline: 'baseline',
	practice: 'plain practice',
	region: 'penalized region',
	shift: 'target shift',
	probe: 'probe',
	washout: 'washout',
	recovery: 'recovery',
	maintenance: 'maintenance',
	retention: 'retention',
	clamp: 'error clamp',
	transfer: 'transfer',
	rest: 'rest',
	stop: 'stop',
	hold: 'wait for a person',
	wait: 'wait for the yoked partner’s block'
};

/** A kind of block as it stands in a sentence. */
export function describeKind(kind: DecisionKind): string {
	return words[kind];
}

/** Whether a decision of this kind brings trials that a rig can run. */
const hasTrials: Readonly<Record<DecisionKind, boolean>> = {
	baseline: true,
	practice: true,
	region: true,
	shift: true,
	probe: true,
	washout: true,
	recovery: true,
	maintenance: true,
	retention: true,
	clamp: true,
	transfer: true,
	rest: false,
	stop: false,
	hold: false,
	wait: false
};

/** False for a rest, a stop, a hold and a wait: they have no block of their own to be used. */
export function hasBlockToRun(kind: DecisionKind): boolean {
	return hasTrials[kind];
}

/** How a decision stands, for lists. */
export const stateWords = {
	held: 'waits for you',
	automatic: 'runs by itself',
	settled: 'settled by a person',
	fallback: 'fallback: plain practice'
} as const;
