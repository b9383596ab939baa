import { entry } from '../linear-algebra/vector.ts';
import { TargetShift } from '../perturbations/target-shift.ts';
import type { ShiftState } from '../perturbations/shift-rule.ts';
import { addObligationsAfter } from './obligations.ts';
import type { ActiveBlock } from './policy-memory.ts';
import type { LastBlock } from './policy-state.ts';
import type { Turn } from './turn.ts';

type ActiveShift = Extract<ActiveBlock, { kind: 'shift' }>;

/** Levels of the rig and of the replay may differ by rounding only. */
const LEVEL_TOLERANCE = 1e-9;

/** A block under a moving target: the rule is replayed trial by trial on what the rig returned. */
export function absorbShiftBlock(turn: Turn, last: LastBlock): void {
	const { memory, facts, settings, task } = turn;
	const active = continueShift(turn, last);
	const hits = last.hits ?? last.errors.map((error) => Math.abs(error) <= task.tolerance);
	const shift = new TargetShift(active.rule, active.state);
	const levels = replay(shift, last, hits);
	const state = shift.dump();
	const trialCount = last.errors.length;
	active.state = state;
	active.trials += trialCount;
	memory.done.shift += trialCount;
	memory.lastChallenge = 'shift';
	if (memory.avoid === 'region') memory.avoid = null;
	if (trialCount >= settings.blockTrials / 2) {
		active.blocks += 1;
		memory.sinceProbe += 1;
	}
	const { theta: level, passed, stalls, status } = state;
	facts.follow = { level, passed, stalls, status, log: shift.log };
	if (last.levels !== null && !isSameTrace(last.levels, levels)) memory.held = 'TRACE';
	else judgeShift(turn, { state, blocks: active.blocks, hits });
}

/**
 * Plain practice was run where a shift block was planned: the level stays, its hold starts anew, as after
 * a gap over which everything is kept.
 *
 * Source:  method sheet D5 (Without network).
 */
export function restartHold({ memory }: Turn): void {
	const { active } = memory;
	if (active?.kind !== 'shift' || !active.state) return;
	const shift = new TargetShift(active.rule, active.state);
	shift.resume(1);
	active.state = shift.dump();
}

function continueShift({ memory }: Turn, last: LastBlock): ActiveShift {
	if (memory.active?.kind === 'shift') return memory.active;
	const rule = last.rule ?? memory.planned?.parameters.rule;
	if (!rule)
		throw new RangeError('a shift block was run, but neither it nor the last plan names a rule');
	const active: ActiveShift = {
		...{ kind: 'shift', blocks: 0, trials: 0, rule, state: null, beforeGap: null }
	};
	memory.active = active;
	memory.offer = null;
	return active;
}

/** Levels shown at each trial. */
function replay(shift: TargetShift, last: LastBlock, hits: readonly boolean[]): number[] {
	const { errors, leftToday } = last;
	return errors.map((error, i) => {
		const { level } = shift;
		const after = errors.length - 1 - i;
		shift.observe({
			error,
			hit: hits[i] ?? null,
			leftToday: leftToday === null ? null : leftToday + after,
			isLastOfBlock: after === 0
		});
		return level;
	});
}

function isSameTrace(returned: readonly number[], replayed: readonly number[]): boolean {
	return (
		returned.length === replayed.length &&
		returned.every((level, i) => Math.abs(level - entry(replayed, i)) <= LEVEL_TOLERANCE)
	);
}

function judgeShift(
	turn: Turn,
	{ state, blocks, hits }: { state: ShiftState; blocks: number; hits: readonly boolean[] }
): void {
	const { status, holdMax } = state;
	const { memory, facts, settings } = turn;
	if (status === 'done') {
		memory.done.held = true;
		endShift(turn, holdMax, 'SHIFT-HELD');
	} else if (status === 'frozen' || blocks >= settings.shift.maxBlocks) {
		memory.done.frozen = true;
		memory.avoid = 'shift';
		endShift(turn, holdMax, 'SHIFT-FROZEN');
	} else if (isBurden(turn, hits)) {
		memory.recover = 'BURDEN';
		facts.ended = 'PAUSED';
	}
}

/** The target goes back: washout, and a plain block after it. */
function endShift(turn: Turn, holdMax: number, why: string): void {
	const { memory, facts, settings } = turn;
	const { washoutTrials, washoutHolds } = settings;
	const trials = Math.max(washoutTrials, Math.ceil((washoutHolds ?? 0) * holdMax));
	const own = washoutHolds === undefined ? {} : { trials };
	memory.active = null;
	delete memory.pendingGap;
	memory.due.push({ kind: 'washout', why: 'WASHOUT-DUE', ...own });
	memory.cool = { blocks: settings.cool.blocks + 1, trials: settings.cool.trials + trials };
	facts.ended = why;
	addObligationsAfter(turn, 'shift');
}

function isBurden({ settings }: Turn, hits: readonly boolean[]): boolean {
	const { successWindow, successMin } = settings.limits;
	if (hits.length < successWindow) return false;
	return hits.slice(-successWindow).filter(Boolean).length < successWindow * successMin;
}
