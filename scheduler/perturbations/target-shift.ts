import { fitLag } from './shift-lag.ts';
import { computeFollowedShare, isHitRateLost } from './shift-follow.ts';
import type { ShiftRule, ShiftState } from './shift-rule.ts';
import { copyShiftState, createShiftState } from './shift-state.ts';

export interface ShiftLogEntry {
	/** 1-based count of trials under the rule. */
	readonly trial: number;
	readonly action: 'advance' | 'goal-held' | 'retreat' | 'freeze' | 'restart';
	readonly rule: string;
	readonly hold: number;
	readonly thetaBefore: number;
	readonly thetaAfter: number;
	/** Null after a gap: nothing was observed. */
	readonly meanError: number | null;
	readonly followed: number | null;
	readonly followedLow: number | null;
}

export interface ObservedTrial {
	/** Target less result, in the unit of the result. */
	readonly error: number;
	/** Null: not known. */
	readonly hit: boolean | null;
	/** Trials left in the day after this one; null: unknown. */
	readonly leftToday: number | null;
	readonly isLastOfBlock: boolean;
}

/** Trials without a shift at the start. */
const START_TRIALS = 8;
const SAME_LEVEL = 1e-12;

/**
 * A target that moves on only after the person has followed (method sheet D3).
 *
 * Units:   levels and errors in the unit of the result.
 * Method:  first step 1 σ, then ½ σ. From trial 12 of a hold, every 4 trials: followed share ≥ .7 with
 *          lower bound ≥ .2 (F1), or ≥ .5 once the hold has lasted long enough (F2): next step, or done at
 *          the goal. Few hits or no following: halfway back; the second time: freeze at the last passed
 *          level.
 * Decision: errors and hits in their order, the rule, and the trials left in the day.
 * Source:  method sheet D3; case policy-shift-typical. State is plain data: dump() and the constructor.
 */
export class TargetShift {
	readonly rule: ShiftRule;
	readonly log: ShiftLogEntry[] = [];
	private readonly state: ShiftState;

	constructor(rule: ShiftRule, state: ShiftState | null = null) {
		this.rule = rule;
		this.state = copyShiftState(state ?? createShiftState(rule));
	}

	get level(): number {
		return this.state.theta;
	}

	/** A copy of everything that the next trial depends on. */
	dump(): ShiftState {
		return copyShiftState(this.state);
	}

	observe({ error, hit, leftToday, isLastOfBlock }: ObservedTrial): void {
		const { state, rule } = this;
		state.trial += 1;
		state.hold += 1;
		state.errors.push(error);
		if (hit !== null) state.hits.push(hit);
		if (state.status !== 'run') return;
		if (state.theta === 0) {
			if (state.hold >= START_TRIALS || isLastOfBlock) this.advance('start', leftToday);
			return;
		}
		const isLook = rule.granularity === 'block' ? isLastOfBlock : this.isTimeToLook();
		if (isLook) this.look(leftToday);
	}

	/** After a gap of hours: start again at the share that is expected to be kept. */
	resume(retained: number): void {
		const { state } = this;
		const next = state.theta * retained;
		this.write('restart', 'gap', next, null);
		state.passed = Math.sign(state.theta) * Math.min(Math.abs(state.passed), Math.abs(next));
		this.moveTo(next);
	}

	private isTimeToLook(): boolean {
		const beyond = this.state.hold - this.rule.holdMin;
		return beyond >= 0 && beyond % this.rule.lookEvery === 0;
	}

	private look(leftToday: number | null): void {
		const { state, rule } = this;
		const { share, low } = computeFollowedShare(rule, state);
		const isSure = low >= rule.followedLowMin;
		const code = this.followedCode(share, isSure);
		if (code) this.pass(code, leftToday);
		else if (isHitRateLost(rule, state)) this.retreat('hit-rate');
		else if (state.hold >= state.holdMax + rule.grace) this.retreat('stalled');
	}

	private followedCode(share: number, isSure: boolean): 'F1' | 'F2' | null {
		if (!isSure) return null;
		if (share >= this.rule.followedMin) return 'F1';
		const isLate = this.state.hold >= this.state.holdMax;
		return isLate && share >= this.rule.followedLateMin ? 'F2' : null;
	}

	private pass(code: 'F1' | 'F2', leftToday: number | null): void {
		const { state, rule } = this;
		if (rule.personal) this.learnLag();
		if (Math.abs(state.theta - rule.goal) >= SAME_LEVEL) return this.advance(code, leftToday);
		this.write('goal-held', code, state.theta);
		state.passed = state.theta;
		state.status = 'done';
	}

	private learnLag(): void {
		const { state, rule } = this;
		const errors = state.errors.map((error) => error - rule.bias);
		state.fit.push({ step: state.theta - state.previous, errors });
		if (state.fit.length < 2) return;
		const { rate, holdMax } = fitLag(rule, state.fit);
		state.rate = rate;
		if (holdMax !== null) state.holdMax = holdMax;
	}

	private advance(code: string, leftToday: number | null): void {
		const { state, rule } = this;
		// Too near the end of the day for a hold of its own: the present one goes on.
		if (leftToday !== null && leftToday < rule.holdMin) return;
		if (code !== 'start') state.passed = state.theta;
		const first = Math.min(rule.firstStepSd, rule.stepCapSd) * rule.sigma;
		const later = Math.min(rule.stepSd, rule.stepCapSd) * rule.sigma;
		const done = Math.abs(state.theta);
		const step = done < first - SAME_LEVEL ? first - done : later;
		const way = rule.goal - state.theta;
		const next = state.theta + Math.sign(way) * Math.min(step, Math.abs(way));
		this.write('advance', code, next);
		this.moveTo(next);
	}

	private retreat(why: string): void {
		const { state } = this;
		state.stalls += 1;
		if (state.stalls >= 2) {
			this.write('freeze', `${why}-twice`, state.passed);
			state.theta = state.passed;
			state.status = 'frozen';
			return;
		}
		const back = (Math.abs(state.theta) - Math.abs(state.passed)) / 2;
		const next = state.theta - Math.sign(state.theta) * back;
		this.write('retreat', why, next);
		this.moveTo(next);
	}

	private moveTo(level: number): void {
		const { state } = this;
		state.previous = state.theta;
		state.theta = level;
		state.hold = 0;
		state.errors = [];
		state.hits = [];
		state.holds += 1;
		// After a retreat or a gap the chain of holds behind the fitted rate starts anew.
		if (this.log.at(-1)?.action !== 'advance') state.fit = [];
	}

	private write(
		action: ShiftLogEntry['action'],
		rule: string,
		thetaAfter: number,
		followed: ReturnType<typeof computeFollowedShare> | null = computeFollowedShare(
			this.rule,
			this.state
		)
	): void {
		const { trial, hold, theta } = this.state;
		this.log.push({
			...{ trial, action, rule, hold, thetaBefore: theta, thetaAfter },
			meanError: followed?.meanError ?? null,
			followed: followed?.share ?? null,
			followedLow: followed?.low ?? null
		});
	}
}
