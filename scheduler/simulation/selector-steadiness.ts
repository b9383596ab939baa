import { add, scale } from '../linear-algebra/vector.ts';
import { chooseForTask } from '../policies/choose-next-block.ts';
import type { Decision } from '../policies/decision.ts';
import { createEmptyMemory } from '../policies/policy-memory.ts';
import type { PolicySettings } from '../policies/policy-settings.ts';
import { policyStateSchema } from '../policies/policy-state.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { drawNormal } from '../random/random-stream.ts';
import { computeTangent } from '../tasks/project-to-manifold.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import type { Task } from '../tasks/task.ts';
import { createNoise } from './shift-characteristics.ts';

/** People whose cloud stays what it is, but for what is said here. */
export interface SteadyPeople {
	/** SD along and across the solutions, scaled. */
	readonly along: number;
	readonly across: number;
	readonly lagOne: number;
	/** SD by which the mean of a block wanders, in own SD. */
	readonly wanderSd: number;
	/** From this block on the cloud is another: its SD times `spread`, its mean moved along by `moveSd`. */
	readonly change: {
		readonly block: number;
		readonly spread: number;
		readonly moveSd: number;
	} | null;
}

export interface Steadiness {
	/** Of the blocks that follow an offer: in how many kind, share or place of the next one is another. */
	readonly changedShare: number;
	readonly blockCount: number;
	/** Share of people for whom a change was confirmed within two blocks after it. */
	readonly confirmedShare: number;
}

/**
 * How often the selector changes its mind about people who do not change, and how fast it sees a change.
 *
 * Method:  plain blocks of the policy's length one after another, offers never run; task of two variables.
 * Decision: people, policy, seed.
 * Source:  method sheet D0 (Measured).
 */
export function measureSteadiness(options: {
	task: Task;
	settings: PolicySettings;
	people: SteadyPeople;
	peopleCount: number;
	blockCount: number;
	seed: number;
}): Steadiness {
	const courses = Array.from({ length: options.peopleCount }, (_, i) =>
		runPerson(options, options.seed + i)
	);
	const after = courses.flatMap(({ isOther }) => isOther);
	const confirmed = courses.filter(({ isConfirmed }) => isConfirmed).length;
	return {
		changedShare: after.filter(Boolean).length / Math.max(1, after.length),
		blockCount: after.length,
		confirmedShare: confirmed / courses.length
	};
}

function runPerson(options: Parameters<typeof measureSteadiness>[0], seed: number) {
	const { task, settings, people } = options;
	const drawBlock = createBlocks(options, seed);
	let memory = createEmptyMemory();
	let before: Decision | null = null;
	const isOther: boolean[] = [];
	let isConfirmed = false;
	for (let block = 0; block < options.blockCount; block++) {
		const last = { kind: block === 0 ? 'baseline' : 'practice', trials: drawBlock(block) };
		const state = policyStateSchema.parse({ day: 0, blockInDay: block, last, memory });
		const decision = chooseForTask({ state, settings, task });
		({ memory } = decision);
		if (before && isOffer(before)) isOther.push(!isSameOffer(before, decision));
		if (people.change && block >= people.change.block && block < people.change.block + 2)
			isConfirmed ||= memory.changed;
		before = decision;
	}
	return { isOther, isConfirmed };
}

function isOffer({ kind }: Decision): boolean {
	return kind === 'region' || kind === 'shift';
}

function isSameOffer(a: Decision, b: Decision): boolean {
	if (a.kind !== b.kind) return false;
	const [left, right] = [a.parameters.region, b.parameters.region];
	const isSamePlace = left?.center.every((value, i) => value === right?.center[i]) ?? true;
	return left?.share === right?.share && isSamePlace;
}

/** Blocks in task units, drawn about the origin of the scaled task. */
function createBlocks(
	{ task: given, people, settings }: Parameters<typeof measureSteadiness>[0],
	seed: number
): (block: number) => number[][] {
	const task = createScaledTask(given);
	const stream = createSeededStream(seed);
	const origin = given.variables.map(() => 0);
	const tangent = computeTangent(task, origin);
	if (!tangent) throw new RangeError('steadiness is measured on tasks of two variables');
	const across = [tangent[1], -tangent[0]];
	const [noiseAlong, noiseAcross] = [
		createNoise(stream, people.lagOne),
		createNoise(stream, people.lagOne)
	];
	return (block) => {
		const change = people.change && block >= people.change.block ? people.change : null;
		const [sd, moved] = [change?.spread ?? 1, change?.moveSd ?? 0];
		const place = moved + people.wanderSd * drawNormal(stream);
		return Array.from({ length: settings.blockTrials }, () => {
			const along = people.along * (place + sd * noiseAlong());
			const aside = people.across * sd * noiseAcross();
			return task.toUnits(add(scale(tangent, along), scale(across, aside)));
		});
	};
}
