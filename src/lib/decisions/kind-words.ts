/** Kinds of block in plain words. */
const words: Record<string, string> = {
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
export function describeKind(kind: string): string {
	return words[kind] ?? kind;
}

/** How a decision stands, for lists. */
export const stateWords = {
	held: 'waits for you',
	automatic: 'runs by itself',
	settled: 'settled by a person',
	fallback: 'fallback: plain practice'
} as const;
