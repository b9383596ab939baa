import type { Design, DesignArm, DesignBlock, DesignVisit } from './design.ts';
import { sum } from './walk-design.ts';

/** Minutes of one visit, told apart. */
export interface VisitBurden {
	readonly visit: number;
	/** Trials with everything that belongs to them. */
	readonly trialMinutes: number;
	/** Rest after trials. */
	readonly trialRestMinutes: number;
	/** Rest between blocks, and rest blocks. */
	readonly blockRestMinutes: number;
	/** The three above: what the blocks take. */
	readonly blockMinutes: number;
	readonly setupMinutes: number;
	readonly cleanupMinutes: number;
	/** What the protocol reserves for the person. */
	readonly plannedMinutes: number;
	readonly trials: number;
}

/** What one arm asks of a person. */
export interface ArmBurden {
	readonly arm: DesignArm;
	readonly visits: readonly VisitBurden[];
	readonly trials: number;
	/** Set-up, blocks and clean-up of all visits: how long a rig is taken. */
	readonly rigHours: number;
	/** Set-up and blocks: how long the person is there. */
	readonly personHours: number;
	/** From the first to the last visit in days, by the gaps' shortest, wanted and longest hours. */
	readonly spanDays: { readonly min: number; readonly target: number; readonly max: number };
}

/**
 * What a design asks of people, arm by arm; a number that is not said counts as 0.
 *
 * Units:   minutes, hours of the rig, days; trials are whole.
 * Method:  a trial lasts trialSeconds and the rest after it; a block's own rest after it counts but for the
 *          last block of a visit. The longest span lets the chain use every pause it may hold.
 * Source:  sum of block minutes and set-up. Accuracy: property test in burden.test.ts.
 * @example listArmBurdens(design)[0]?.rigHours
 */
export function listArmBurdens(design: Design): ArmBurden[] {
	const spanDays = measureSpan(design);
	return design.arms.map((arm) => {
		const visits = design.visits.map((visit, index) => measureVisit(design, { visit, index, arm }));
		const person = sum(visits.map((one) => one.setupMinutes + one.blockMinutes));
		const cleanup = sum(visits.map((one) => one.cleanupMinutes));
		return {
			...{ arm, visits, spanDays },
			trials: sum(visits.map(({ trials }) => trials)),
			personHours: person / 60,
			rigHours: (person + cleanup) / 60
		};
	});
}

function measureVisit(
	design: Design,
	{ visit, index, arm }: { visit: DesignVisit; index: number; arm: DesignArm }
): VisitBurden {
	const blocks = visit.armBlocks[arm.key] ?? visit.blocks;
	const trials = sum(blocks.map(countTrials));
	const trialMinutes = (trials * (design.trialSeconds ?? 0)) / 60;
	const trialRestMinutes =
		sum(blocks.map((block) => countTrials(block) * (block.restBetweenTrialsSeconds ?? 0))) / 60;
	const blockRestMinutes = measureBlockRest(blocks);
	return {
		...{ visit: index + 1, trials, trialMinutes, trialRestMinutes, blockRestMinutes },
		blockMinutes: trialMinutes + trialRestMinutes + blockRestMinutes,
		setupMinutes: visit.setupMinutes ?? 0,
		cleanupMinutes: visit.cleanupMinutes ?? 0,
		plannedMinutes: visit.minutes ?? 0
	};
}

function countTrials({ purpose, trials }: DesignBlock): number {
	return purpose === 'rest' ? 0 : (trials ?? 0);
}

function measureBlockRest(blocks: readonly DesignBlock[]): number {
	const between = blocks.slice(0, -1).map(({ restAfterMinutes }) => restAfterMinutes ?? 0);
	const resting = blocks.map((block) => (block.purpose === 'rest' ? (block.restMinutes ?? 0) : 0));
	return sum(between) + sum(resting);
}

function measureSpan({ visits, booking }: Design): ArmBurden['spanDays'] {
	const gaps = visits.slice(1).map(({ gapBefore }) => gapBefore);
	const hours = (name: 'minHours' | 'targetHours' | 'maxHours') =>
		gaps.map((gap) => gap?.[name] ?? 0);
	const { count, maxHours } = booking.pauses;
	// Pauses go where they lengthen the chain most.
	const gained = visits
		.slice(1)
		.filter(({ kind }) => kind === 'practice')
		.map(({ gapBefore }) => Math.max(0, (maxHours ?? 0) - (gapBefore?.maxHours ?? 0)))
		.sort((a, b) => b - a)
		.slice(0, count ?? 0);
	return {
		min: sum(hours('minHours')) / 24,
		target: sum(hours('targetHours')) / 24,
		max: (sum(hours('maxHours')) + sum(gained)) / 24
	};
}
