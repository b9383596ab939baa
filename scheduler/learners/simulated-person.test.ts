import { describe, expect, it } from 'vitest';
import { chooseNextBlock } from '../policies/choose-next-block.ts';
import { PUCK_RECORD } from '../policies/planted-trials.test-data.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { computeTangent } from '../tasks/project-to-manifold.ts';
import { drawStyle, drawTraits, type PersonStyle } from './draw-traits.ts';
import { walkManifold } from './manifold-walk.ts';
import {
	simulateBlock,
	startPerson,
	type PersonTraits,
	type SimulateBlockOptions
} from './simulated-person.ts';

const task = createScaledTask(createTask(PUCK_RECORD));
const AT_ORIGIN = walkManifold(task).at(0);

function makeTraits(part: Partial<PersonTraits> = {}): PersonTraits {
	return {
		preferredPlace: 0,
		spreadAlong: 0.95,
		spreadAcross: 0.3,
		noviceFactor: 1,
		learningTrials: 80,
		startBias: 0,
		errorPull: 0.12,
		exploration: 0.5,
		escapeStep: 0.07,
		...part
	};
}

function simulate(part: Partial<SimulateBlockOptions> = {}, seed = 1) {
	const traits = part.traits ?? makeTraits();
	return simulateBlock({
		task,
		traits,
		state: startPerson(traits),
		stream: createSeededStream(seed),
		trialCount: 60,
		...part
	});
}

/** A region like those that are placed: the person's own cloud, 1.8 spreads wide, at the origin. */
function regionAtOrigin() {
	const [t1, t2] = computeTangent(task, AT_ORIGIN) ?? [1, 0];
	const [along, across] = [(1.8 * 0.95) ** 2, (1.8 * 0.3) ** 2];
	const cross = (along - across) * t1 * t2;
	const shape = [
		[along * t1 * t1 + across * t2 * t2, cross],
		[cross, along * t2 * t2 + across * t1 * t1]
	];
	return { center: [...AT_ORIGIN], shape };
}

function shareOf(flags: readonly boolean[]): number {
	return flags.filter(Boolean).length / flags.length;
}

describe('a simulated person', () => {
	it('gives the same trials for the same seed and others for another', () => {
		expect(simulate()).toEqual(simulate());
		expect(simulate({}, 2).executions).not.toEqual(simulate().executions);
	});

	it('has trials in task units within the ranges', () => {
		const traits = makeTraits({ spreadAlong: 6, spreadAcross: 4 });
		for (const z of simulate({ traits, trialCount: 500 }).executions.map(task.toScaled)) {
			expect(task.isWithinRanges(z)).toBe(true);
		}
	});

	it('spreads along and across the solutions as the traits say', () => {
		const traits = makeTraits({ errorPull: 0, exploration: 0 });
		const { executions } = simulate({ traits, trialCount: 4000 });
		const [t1, t2] = computeTangent(task, AT_ORIGIN) ?? [1, 0];
		const offsets = executions
			.map(task.toScaled)
			.map((z) => z.map((v, i) => v - (AT_ORIGIN[i] ?? 0)));
		const spreadTowards = (u1: number, u2: number) =>
			Math.sqrt(offsets.reduce((sum, [a = 0, b = 0]) => sum + (a * u1 + b * u2) ** 2, 0) / 4000);
		// A spread from 4000 trials has a standard error of 1.1 %; curvature adds a little across.
		expect(spreadTowards(t1, t2) / 0.95).toBeCloseTo(1, 1);
		expect(spreadTowards(t2, -t1) / 0.3).toBeCloseTo(1, 1);
	});

	it('misses less after practice', () => {
		const traits = makeTraits({ noviceFactor: 2.5, startBias: 0.15 });
		const early = simulate({ traits, trialCount: 40 });
		const late = simulate({ traits, trialCount: 40, state: { ...early.state, trialCount: 400 } });
		const meanMiss = (errors: readonly number[]) =>
			errors.reduce((sum, error) => sum + Math.abs(error), 0) / errors.length;
		expect(meanMiss(late.errors)).toBeLessThan(0.7 * meanMiss(early.errors));
	});

	it('follows a moved target, unless it takes back no error', () => {
		const meanOfLast = (errors: readonly number[]) =>
			errors.slice(-20).reduce((sum, error) => sum + error, 0) / 20;
		const follower = simulate({ targetShift: 0.2 });
		const stubborn = simulate({ targetShift: 0.2, traits: makeTraits({ errorPull: 0 }) });
		expect(Math.abs(meanOfLast(follower.errors))).toBeLessThan(0.05);
		expect(meanOfLast(stubborn.errors)).toBeCloseTo(-0.2, 1);
		expect(follower.state.bias).toBeCloseTo(0.2, 1);
	});

	it('moves along the solutions out of a penalized region', () => {
		const region = regionAtOrigin();
		const walk = (escapeStep: number, seed: number) => {
			const traits = makeTraits({ escapeStep, exploration: escapeStep === 0 ? 0 : 0.5 });
			const { penalized, errors } = simulate({ traits, region, trialCount: 120 }, seed);
			const last = penalized.slice(-40);
			const hits = errors.slice(-40).map((error) => Math.abs(error) <= task.tolerance);
			return { penalized: shareOf(last), hit: shareOf(hits) };
		};
		const seeds = [1, 2, 3, 4, 5, 6];
		const meanOf = (values: readonly number[]) => values.reduce((a, b) => a + b, 0) / values.length;
		const movers = seeds.map((seed) => walk(0.07, seed));
		const stayers = seeds.map((seed) => walk(0, seed));
		expect(meanOf(movers.map(({ penalized }) => penalized))).toBeLessThan(0.35);
		expect(meanOf(stayers.map(({ penalized }) => penalized))).toBeGreaterThan(0.65);
		expect(meanOf(movers.map(({ hit }) => hit))).toBeGreaterThan(0.8);
	});

	it('keeps its way out over blocks', () => {
		const region = regionAtOrigin();
		const first = simulate({ region });
		const second = simulate({ region, state: first.state }, 2);
		expect(first.state.heading).not.toBe(0);
		expect(second.state.heading).toBe(first.state.heading);
		expect(second.state.trialCount).toBe(120);
	});
});

describe('drawn people', () => {
	it('most practised explorers get a region to leave, by the policy itself', () => {
		const kinds = Array.from({ length: 12 }, (_, seed) => decideAfterBaseline('explorer', seed));
		expect(kinds.filter((kind) => kind === 'region').length).toBeGreaterThanOrEqual(7);
	});

	it('styles come in the shares stated', () => {
		const stream = createSeededStream(5);
		const styles = Array.from({ length: 1000 }, () => drawStyle(stream));
		const shareOfStyle = (style: PersonStyle) => shareOf(styles.map((one) => one === style));
		// Four standard errors of a share of 1000.
		expect(Math.abs(shareOfStyle('explorer') - 0.6)).toBeLessThan(0.062);
		expect(Math.abs(shareOfStyle('rigid') - 0.2)).toBeLessThan(0.051);
	});
});

function decideAfterBaseline(style: PersonStyle, seed: number): string {
	const stream = createSeededStream(seed);
	const traits = drawTraits(stream, { style, tolerance: task.tolerance });
	const state = { ...startPerson(traits), trialCount: 300, bias: 0 };
	const { executions } = simulateBlock({ task, traits, state, stream, trialCount: 60 });
	const decision = chooseNextBlock({
		task: PUCK_RECORD,
		protocol: {
			aims: { region: { share: 1, escapes: 3 } },
			settle: { minBlocks: 1, maxBlocks: 1 }
		},
		state: {
			day: 1,
			blockInDay: 1,
			trialsToday: 60,
			last: { kind: 'baseline', trials: executions }
		}
	});
	return decision.kind;
}
