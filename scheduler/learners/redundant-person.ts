import { solveSquare } from '../linear-algebra/solve-square.ts';
import { splitRowSpace } from '../linear-algebra/row-space.ts';
import { add, column, dot, entry, scale, subtract, type Vector } from '../linear-algebra/vector.ts';
import { drawNormal, type Uint32Stream } from '../random/random-stream.ts';
import { projectToManifold } from '../tasks/project-to-manifold.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import {
	adapt,
	forget,
	startAdaptation,
	sumAdaptation,
	type AdaptationState
} from './adaptation.ts';
import type { RedundantTraits } from './redundant-traits.ts';

/** What practice changes; plain data. */
export interface RedundantState {
	readonly trialCount: number;
	/** Where the person aims without what was adapted, scaled. */
	readonly aim: readonly number[];
	readonly adaptation: AdaptationState;
	readonly wasSuccess: boolean;
	/** Running mean of success. */
	readonly usual: number;
}

/** What one trial is run under. */
export interface TrialConditions {
	/** How far the target has moved, in the unit of the result; only for one result. */
	readonly shift: number;
	readonly isPenalized: (z: Vector) => boolean;
	/** hidden: neither error nor success is seen; a number: this error is shown instead. */
	readonly feedback: 'shown' | 'hidden' | number;
}

export interface TrialOutcome {
	readonly z: readonly number[];
	/** Target less result. */
	readonly error: number;
	readonly hit: boolean;
	readonly penalized: boolean;
}

/**
 * A person before the first trial, aiming at the solution nearest to a place.
 * @throws {RangeError} no solution lies near it
 */
export function startRedundantPerson(task: ScaledTask, place: Vector): RedundantState {
	const covariance = place.map((_, i) => place.map((_value, j) => (i === j ? 1 : 0)));
	const nearest = projectToManifold({ task, mean: place, covariance });
	if (!nearest.ok) throw new RangeError('no solution of the task lies near the start');
	const adaptation = startAdaptation(task.resultCount);
	return { trialCount: 0, aim: nearest.point, adaptation, wasSuccess: false, usual: 0 };
}

/**
 * One trial of a model learner in a task with more ways than results.
 *
 * Shapes:  aim and executions (d), results (r). Units: scaled; errors in the unit of the result.
 * Method:  y = aim + Jᵀ(JJᵀ)⁻¹·x + ε + η. The adaptation x takes back errors in the space of the results
 *          (one or two rates); ε, the tried part, is kept after success (keep) or by how much success
 *          beats the usual (gradient, natural form); η, the motor noise, shrinks with practice.
 * Source:  method sheet C (Noise; Policy gradient; Error-based pull). A model for planning and for checks
 *          of policies; it claims nothing about people.
 * Accuracy: reproduces the closed forms of its parts (redundant-person.test.ts).
 */
export function runRedundantTrial(options: {
	task: ScaledTask;
	traits: RedundantTraits;
	state: RedundantState;
	conditions: TrialConditions;
	stream: Uint32Stream;
}): { outcome: TrialOutcome; state: RedundantState } {
	const { task, traits, state, conditions, stream } = options;
	const { jacobian, basis, complement } = findFrame(task, state.aim);
	const draw = (along: number, across: number) =>
		[
			...complement.map((direction) => scale(direction, along * drawNormal(stream))),
			...basis.map((direction) => scale(direction, across * drawNormal(stream)))
		].reduce<number[]>(add, [...state.aim].fill(0));
	const isTrying = traits.explore === 'always' || !state.wasSuccess;
	const tried = draw(
		traits.exploration * traits.motorAlong,
		traits.exploration * traits.motorAcross
	);
	const exploration = isTrying ? tried : tried.map(() => 0);
	const factor =
		1 + (traits.noviceFactor - 1) * Math.exp(-state.trialCount / traits.learningTrials);
	const noise = draw(factor * traits.motorAlong, factor * traits.motorAcross);
	const lifted = add(state.aim, lift(jacobian, sumAdaptation(state.adaptation)));
	const z = keepWithin(task, add(add(lifted, exploration), noise));
	const outcome = judgeTrial(task, z, conditions);
	return { outcome, state: learn({ ...options, exploration }, outcome) };
}

interface Frame {
	readonly jacobian: number[][];
	/** Directions that change the results, and those that do not. */
	readonly basis: readonly Vector[];
	readonly complement: readonly Vector[];
}

/** An aim is looked at in every trial until it moves. */
const frames = new WeakMap<readonly number[], { task: ScaledTask; frame: Frame }>();

function findFrame(task: ScaledTask, aim: readonly number[]): Frame {
	const known = frames.get(aim);
	if (known?.task === task) return known.frame;
	const jacobian = task.jacobian(aim);
	const frame = { jacobian, ...splitRowSpace(jacobian) };
	frames.set(aim, { task, frame });
	return frame;
}

/** The smallest change of the execution that changes the results by x, to first order. */
function lift(jacobian: readonly Vector[], x: Vector): number[] {
	const gram = jacobian.map((left) => jacobian.map((right) => dot(left, right)));
	const weights = solveSquare(gram, x);
	const zero = (jacobian[0] ?? []).map(() => 0);
	return weights ? zero.map((_, i) => dot(weights, column(jacobian, i))) : zero;
}

/** A variable that would leave its range stays at its end. */
function keepWithin(task: ScaledTask, z: number[]): number[] {
	if (task.isWithinRanges(z)) return z;
	return z.map((_, i) => {
		const alone = z.map((value, j) => (j === i ? value : 0));
		if (task.isWithinRanges(alone)) return entry(z, i);
		let [inside, outside] = [0, entry(z, i)];
		for (let half = 0; half < 40; half++) {
			const middle = (inside + outside) / 2;
			const isIn = task.isWithinRanges(alone.map((value, j) => (j === i ? middle : value)));
			if (isIn) inside = middle;
			else outside = middle;
		}
		return inside;
	});
}

function judgeTrial(task: ScaledTask, z: number[], conditions: TrialConditions): TrialOutcome {
	const result = task.evaluate(z);
	const error = conditions.shift - result;
	const hit = Math.abs(error) <= task.tolerance;
	return { z, error, hit, penalized: conditions.isPenalized(z) };
}

function learn(
	run: Parameters<typeof runRedundantTrial>[0] & { exploration: number[] },
	{ z, hit, penalized }: TrialOutcome
): RedundantState {
	const { task, traits, state, conditions, exploration } = run;
	const trialCount = state.trialCount + 1;
	if (conditions.feedback === 'hidden') return { ...state, trialCount };
	const { feedback } = conditions;
	const shown = (value: number, i: number) => (i === 0 ? conditions.shift : 0) - value;
	const errors =
		feedback === 'shown'
			? task.results(z).map(shown)
			: task.results(z).map((_, i) => (i === 0 ? feedback : 0));
	const isSuccess = feedback === 'shown' ? hit && !penalized : Math.abs(feedback) <= task.tolerance;
	const reward = isSuccess ? 1 : 0;
	const gain =
		traits.rewardRule === 'keep'
			? traits.rewardRate * reward
			: traits.rewardRate * (reward - state.usual);
	const usual = state.usual + traits.usualRate * (reward - state.usual);
	const isMoved = gain !== 0 && exploration.some((part) => part !== 0);
	return {
		...{ trialCount, usual, wasSuccess: isSuccess },
		aim: isMoved ? keepWithin(task, add(state.aim, scale(exploration, gain))) : state.aim,
		adaptation: adapt(traits.adaptation, state.adaptation, errors)
	};
}

/** Hours without a trial. */
export function restRedundantPerson(
	traits: RedundantTraits,
	state: RedundantState,
	gapHours: number
): RedundantState {
	return { ...state, adaptation: forget(traits.adaptation, state.adaptation, gapHours) };
}

/** How far the aim has moved, scaled. */
export function distanceMoved(from: RedundantState, to: RedundantState): number {
	return Math.hypot(...subtract(to.aim, from.aim));
}
