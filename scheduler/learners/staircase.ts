/**
 * Step to the easier side that holds a success rate, for a given step to the harder side.
 *
 * Method:  p·harder = (1 − p)·easier in the long run.
 * Source:  C. Kaernbach, Perception & Psychophysics 49 (1991); case weighted-up-down.
 * @throws {RangeError} a success rate outside 0 … 1
 * @example computeEasierStep({ targetSuccess: 0.7, stepHarder: 1 }) // 2.333…
 */
export function computeEasierStep(options: { targetSuccess: number; stepHarder: number }): number {
	const { targetSuccess, stepHarder } = options;
	if (!(targetSuccess > 0 && targetSuccess < 1))
		throw new RangeError('targetSuccess must lie between 0 and 1');
	return (stepHarder * targetSuccess) / (1 - targetSuccess);
}

/** A difficulty that follows success: weighted up-down, or steps that shrink. */
export type Staircase =
	| { readonly kind: 'up-down'; readonly stepHarder: number }
	/** Robbins and Monro: step size / trial number. */
	| { readonly kind: 'shrinking'; readonly size: number }
	/** Kesten: the step shrinks only when the direction turns. */
	| { readonly kind: 'shrinking-at-turns'; readonly size: number };

export interface StaircaseState {
	readonly level: number;
	readonly trial: number;
	readonly turns: number;
	readonly heading: -1 | 0 | 1;
}

export function startStaircase(level: number): StaircaseState {
	return { level, trial: 0, turns: 0, heading: 0 };
}

/**
 * The level after one more trial; a higher level is harder.
 *
 * Units:   those of the level.
 * Method:  up-down: + harder on success, − easier on failure; else level + c/n·(z − φ) (Robbins and
 *          Monro) or c/(2 + turns)·(z − φ) after the second trial (Kesten).
 * Source:  method sheet D1 (hold-rate, default .70).
 * Accuracy: holds the success rate within sampling error (staircase.test.ts).
 */
export function stepStaircase(options: {
	staircase: Staircase;
	state: StaircaseState;
	success: boolean;
	targetSuccess: number;
}): StaircaseState {
	const { staircase, state, success, targetSuccess } = options;
	const trial = state.trial + 1;
	const heading = success ? 1 : -1;
	const turns = state.turns + (state.heading !== 0 && heading !== state.heading ? 1 : 0);
	return { level: state.level + computeMove(), trial, turns, heading };

	function computeMove(): number {
		if (staircase.kind === 'up-down') {
			const { stepHarder } = staircase;
			return success ? stepHarder : -computeEasierStep({ targetSuccess, stepHarder });
		}
		const beyond = (success ? 1 : 0) - targetSuccess;
		const slowing = staircase.kind === 'shrinking' || trial <= 2 ? trial : 2 + turns;
		return (staircase.size / slowing) * beyond;
	}
}
