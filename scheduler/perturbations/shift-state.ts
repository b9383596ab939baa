import type { ShiftRule, ShiftState } from './shift-rule.ts';

/** The state before the first trial. */
export function createShiftState(rule: ShiftRule): ShiftState {
	return {
		...{ theta: 0, passed: 0, previous: 0, hold: 0, errors: [], hits: [], stalls: 0 },
		...{ status: 'run', trial: 0, holdMax: rule.holdMax, rate: [], fit: [], holds: 0 }
	};
}

/** A copy that shares nothing with the original. */
export function copyShiftState(state: ShiftState): ShiftState {
	return {
		...state,
		errors: [...state.errors],
		hits: [...state.hits],
		rate: [...state.rate],
		fit: state.fit.map(({ step, errors }) => ({ step, errors: [...errors] }))
	};
}
