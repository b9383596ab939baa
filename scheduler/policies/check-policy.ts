import type { PolicySettings } from './policy-settings.ts';

/** What a policy asks for that its measured properties speak against (calibration tables). */
export type PolicyConcern =
	/** More than one person in ten who does not adapt would pass the first step. */
	| 'FIRST-STEP-SMALL'
	/** Spread and bias of the result would be known too poorly for the rule. */
	| 'FEW-PLAIN-TRIALS'
	/** A region that nearly nothing leaks out of leaves reward alone nothing to follow. */
	| 'LITTLE-LEAKS'
	| 'FIRST-SHARE-HARD'
	/** Shorter than three times the longest hold. */
	| 'WASHOUT-SHORT'
	/** A day cannot hold one block. */
	| 'DAY-SHORT'
	/** Kinds of block can be told apart by their length. */
	| 'LENGTHS-DIFFER'
	/** A hold would be seen by operators. */
	| 'HOLD-WITHOUT-FALLBACK';

export interface FoundConcern {
	readonly code: PolicyConcern;
	/** Whether a checker should refuse the policy, or only say so. */
	readonly isRefusal: boolean;
	readonly text: string;
}

const FIRST_STEP_MIN_SD = 1;
const PLAIN_MIN = 100;
const LEAK_MIN = 0.1;
const SHARE_MAX = 0.8;
const WASHOUT_HOLDS = 3;

/**
 * Reads a policy for settings that its measured properties speak against.
 *
 * Decision: settings and whether operators are blinded; nothing is simulated.
 * Source:  method sheet D0 (Blinded operators), D1 (washout), D2 and D3 (Measured).
 * Accuracy: the shares behind it stand in scheduler/CALIBRATION.md.
 */
export function checkPolicy(
	settings: PolicySettings,
	{ operatorsAreBlinded }: { operatorsAreBlinded: boolean }
): FoundConcern[] {
	return [
		...(settings.aims.shift ? checkShift(settings) : []),
		...(settings.aims.region ? checkRegion(settings) : []),
		...checkDay(settings),
		...(operatorsAreBlinded ? checkBlinding(settings) : [])
	];
}

function checkShift({ shift, washoutTrials, washoutHolds }: PolicySettings): FoundConcern[] {
	const { firstStepSd, stepCapSd, holdMax } = shift.rule;
	const least = Math.max(washoutTrials, (washoutHolds ?? 0) * holdMax);
	return [
		...concern(Math.min(firstStepSd, stepCapSd) < FIRST_STEP_MIN_SD, 'FIRST-STEP-SMALL', true, [
			`The first step is ${Math.min(firstStepSd, stepCapSd)} SD: more than 10 % of people who do not adapt`,
			`would pass it. Use at least ${FIRST_STEP_MIN_SD} SD.`
		]),
		...concern(shift.minPlain < PLAIN_MIN, 'FEW-PLAIN-TRIALS', false, [
			`The spread of the result would be taken from ${shift.minPlain} trials; the rule was measured`,
			`with at least ${PLAIN_MIN}.`
		]),
		...concern(least < WASHOUT_HOLDS * holdMax, 'WASHOUT-SHORT', false, [
			`Washout lasts ${least} trials; three times the longest hold are ${WASHOUT_HOLDS * holdMax}.`
		])
	];
}

function checkRegion({ place }: PolicySettings): FoundConcern[] {
	const hardest = Math.max(...place.shares);
	return [
		...concern(place.leakMin < LEAK_MIN, 'LITTLE-LEAKS', false, [
			`Regions may leave less than ${LEAK_MIN * 100} % success to a person who does not move: people who`,
			'learn from success alone then rarely find the way out.'
		]),
		...concern(hardest > SHARE_MAX, 'FIRST-SHARE-HARD', false, [
			`The hardest region catches ${hardest * 100} % of own trials; above ${SHARE_MAX * 100} % few people`,
			'leave it.'
		])
	];
}

function checkDay({ blockTrials, recoveryTrials, limits }: PolicySettings): FoundConcern[] {
	return concern(Math.min(blockTrials, recoveryTrials) > limits.trialsPerDay, 'DAY-SHORT', true, [
		`A block of ${blockTrials} trials does not fit a day of ${limits.trialsPerDay}.`
	]);
}

function checkBlinding(settings: PolicySettings): FoundConcern[] {
	const { blockTrials, probeTrials, washoutTrials, recoveryTrials, retentionTrials } = settings;
	const own = [probeTrials, washoutTrials, recoveryTrials, retentionTrials];
	const obliged = (settings.obligations ?? []).flatMap(({ trials }) => trials ?? []);
	const isOneLength = [...own, ...obliged].every((trials) => trials === blockTrials);
	return [
		...concern(!isOneLength || settings.washoutHolds !== undefined, 'LENGTHS-DIFFER', true, [
			`Operators are blinded: every kind of block needs ${blockTrials} trials.`
		]),
		...concern(settings.holdFallback === undefined, 'HOLD-WITHOUT-FALLBACK', false, [
			'Operators are blinded: a block is needed that runs while a person looks at a held case.'
		])
	];
}

function concern(
	isFound: boolean,
	code: PolicyConcern,
	isRefusal: boolean,
	words: readonly string[]
): FoundConcern[] {
	return isFound ? [{ code, isRefusal, text: words.join(' ') }] : [];
}
