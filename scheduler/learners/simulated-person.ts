import { add, dot, scale, type Vector } from '../linear-algebra/vector.ts';
import { createRegionTest } from '../perturbations/escape-statistics.ts';
import type { Region } from '../perturbations/region-settings.ts';
import { drawNormal, drawUniform, type Uint32Stream } from '../random/random-stream.ts';
import { computeTangent } from '../tasks/project-to-manifold.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import { walkManifold, type ManifoldWalk } from './manifold-walk.ts';

/** What stays the same of a simulated person. Distances in scaled units of the task. */
export type PersonTraits = {
	/** Preferred place on the manifold, arc length from the solution nearest to the task's origin. */
	preferredPlace: number;
	/** Spread of single trials along and across the manifold once practised. */
	spreadAlong: number;
	spreadAcross: number;
	/** Spread across at the very first trial, as a multiple of the practised one. */
	noviceFactor: number;
	/** Trials after which 63 % of the way to the practised spread is done. */
	learningTrials: number;
	/** Signed error of the aim at the very first trial, in the result's unit. */
	startBias: number;
	/** Share of each error that the aim takes back at the next trial, 0 to 1. */
	errorPull: number;
	/** How far the aim tries out new places along the manifold after a failure. */
	exploration: number;
	/** How far the aim moves out of a penalized region after each penalized trial. */
	escapeStep: number;
};

/** What practice changes. Plain data: keep it between blocks. */
export type PersonState = {
	trialCount: number;
	/** Aim on the manifold, arc length. */
	place: number;
	/** Aim off the manifold, as a signed result. */
	bias: number;
	/** Way out that was taken, 0 before any. */
	heading: -1 | 0 | 1;
};

export type SimulatedBlock = {
	/** Executions in the task's units, in order. */
	executions: number[][];
	/** Signed results as the person saw them, a target shift taken off. */
	errors: number[];
	/** Whether each trial fell into the region. */
	penalized: boolean[];
	state: PersonState;
};

export type SimulateBlockOptions = {
	task: ScaledTask;
	traits: PersonTraits;
	state: PersonState;
	stream: Uint32Stream;
	trialCount: number;
	/** Penalized region in scaled units, if there is one. */
	region?: Pick<Region, 'center' | 'shape'>;
	/** How far the target has moved, in the result's unit, per trial or for all; 0 when left out. */
	targetShift?: number | readonly number[];
};

/** A person before the first trial. */
export function startPerson({ preferredPlace, startBias }: PersonTraits): PersonState {
	return { trialCount: 0, place: preferredPlace, bias: startBias, heading: 0 };
}

/**
 * One block of trials by a simulated person. A toy learner for demonstrations and tests; it claims
 * nothing about people.
 *
 * Shapes: two-variable task, traits, state and count in; executions (trials x 2) and new state out.
 * Units: executions in task units; places and spreads scaled; errors in the result's unit.
 * Method: each trial is aim + noise along the tangent and across it. The aim lies on the manifold
 * plus a bias. The bias takes back a share of each error (so it follows a moved target); practice
 * shrinks the noise across exponentially; a penalized trial pushes the aim along the manifold out of
 * the region, any failed one makes it try places nearby and a success there is kept.
 * Source: learner forms of method sheet C (single rate, exploration after failure, reward kept).
 * Accuracy: the same seed gives the same trials; scheduler/learners/simulated-person.test.ts.
 * @throws RangeError when the task is not of two variables or no solution lies near its origin
 * @example simulateBlock({ task, traits, state: startPerson(traits), stream, trialCount: 60 })
 */
export function simulateBlock(options: SimulateBlockOptions): SimulatedBlock {
	const { task, trialCount, region } = options;
	const walk = walkManifold(task);
	const isPenalized = region ? createRegionTest(region) : () => false;
	const block: SimulatedBlock = { executions: [], errors: [], penalized: [], state: options.state };
	let triedStep = 0;
	for (let trial = 0; trial < trialCount; trial += 1) {
		const aim = walk.at(block.state.place + triedStep);
		const z = executeTrial(options, block.state, aim);
		const error = task.evaluate(z) - shiftAt(options, trial);
		const penalized = isPenalized(z);
		const isSuccess = !penalized && Math.abs(error) <= task.tolerance;
		block.executions.push(task.toUnits(z));
		block.errors.push(error);
		block.penalized.push(penalized);
		const keptStep = isSuccess ? triedStep : 0;
		block.state = learn(options, { state: block.state, walk, error, penalized, keptStep });
		triedStep = isSuccess ? 0 : options.traits.exploration * drawNormal(options.stream);
	}
	return block;
}

function shiftAt({ targetShift = 0 }: SimulateBlockOptions, trial: number): number {
	return typeof targetShift === 'number' ? targetShift : (targetShift[trial] ?? 0);
}

/** Aim, bias and noise of one trial, kept within the variables' ranges. */
function executeTrial(
	{ task, traits, stream }: SimulateBlockOptions,
	state: PersonState,
	aim: Vector
): number[] {
	const tangent = computeTangent(task, aim);
	if (!tangent) throw new RangeError('a simulated person needs a task of two variables');
	const slope = task.gradient(aim);
	const steepness = dot(slope, slope);
	const across = [tangent[1], -tangent[0]];
	const left = Math.exp(-state.trialCount / traits.learningTrials);
	const noise = traits.spreadAcross * (1 + (traits.noviceFactor - 1) * left);
	const biased = add(aim, scale(slope, state.bias / steepness));
	const wandered = add(biased, scale(tangent, traits.spreadAlong * drawNormal(stream)));
	const z = add(wandered, scale(across, noise * drawNormal(stream)));
	return task.isWithinRanges(z) ? z : [...aim];
}

function learn(
	{ traits, region, stream }: SimulateBlockOptions,
	trial: {
		state: PersonState;
		walk: ManifoldWalk;
		error: number;
		penalized: boolean;
		keptStep: number;
	}
): PersonState {
	const { state, walk, error, penalized, keptStep } = trial;
	const bias = state.bias - traits.errorPull * error;
	const next = { ...state, trialCount: state.trialCount + 1, bias, place: state.place + keptStep };
	if (!penalized || !region) return { ...next, place: walk.keep(next.place) };
	const heading = state.heading === 0 ? chooseWayOut(state, walk, region, stream) : state.heading;
	return { ...next, heading, place: walk.keep(next.place + heading * traits.escapeStep) };
}

/** Away from the region's center along the manifold; by lot where the aim is at the center. */
function chooseWayOut(
	{ place }: PersonState,
	walk: ManifoldWalk,
	region: Pick<Region, 'center' | 'shape'>,
	stream: Uint32Stream
): -1 | 1 {
	const offset = place - walk.nearestPlace(region.center);
	if (Math.abs(offset) > 0.1) return offset > 0 ? 1 : -1;
	return drawUniform(stream) < 0.5 ? -1 : 1;
}
