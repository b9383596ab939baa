import { createShiftState } from '../../perturbations/shift-state.ts';
import { TargetShift } from '../../perturbations/target-shift.ts';
import type { ActiveBlock } from '../policy-memory.ts';
import type { Answer, Turn } from '../turn.ts';

/** A perturbation that has been started goes on until it has ended. */
export function askRunning(turn: Turn): Answer | null {
	const { active } = turn.memory;
	if (active?.kind === 'region') return continueRegion(turn, active);
	return active?.kind === 'shift' ? continueShift(turn, active) : null;
}

function continueRegion(
	{ facts }: Turn,
	{ region, blocks }: Extract<ActiveBlock, { kind: 'region' }>
): Answer {
	return {
		...{ code: 'CONTINUE-REGION', kind: 'region' },
		parameters: { region, blockOfRegion: blocks + 1 },
		values: { ...facts.escape }
	};
}

function continueShift(
	{ state, settings, memory }: Turn,
	active: Extract<ActiveBlock, { kind: 'shift' }>
): Answer {
	const { rule } = active;
	const before = active.beforeGap ?? active.state ?? createShiftState(rule);
	const shift = new TargetShift(rule, before);
	let retained: number | undefined;
	const gapHours = memory.pendingGap?.hours ?? state.gapHours;
	if (gapHours) {
		const { floor, tauHours } = settings.forget;
		retained = floor + (1 - floor) * Math.exp(-gapHours / tauHours);
		shift.resume(retained);
		active.beforeGap = before;
		active.state = shift.dump();
	}
	const now = shift.dump();
	return {
		...{ code: 'CONTINUE-SHIFT', kind: 'shift' },
		parameters: {
			...{ rule, level: now.theta, hold: now.hold, state: now },
			granularity: rule.granularity,
			...(retained === undefined ? {} : { retained })
		},
		values: { level: now.theta, passed: now.passed }
	};
}
