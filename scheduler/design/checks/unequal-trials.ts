import { DESIGN_LIMITS } from '../design-limits.ts';
import { nameVisit, plainDesignBlock, type DesignBlock } from '../design.ts';
import type { Check, Finding } from '../finding.ts';
import type { DesignOperation } from '../repair.ts';
import {
	describeByArm,
	listArmVisits,
	listBlockLists,
	sum,
	writeCount,
	type ArmVisit
} from '../walk-design.ts';

/** Arms that practise more than others in a visit. */
export const checkTrials: Check = (design) =>
	design.visits.flatMap((visit, index): Finding[] => {
		const rows = listArmVisits(design, visit).map((row) => ({ ...row, trials: countKnown(row) }));
		const known = rows.flatMap(({ trials }) => trials ?? []);
		if (known.length < rows.length || rows.length < 2) return [];
		const apart = Math.max(...known) - Math.min(...known);
		if (apart <= DESIGN_LIMITS.trialsApart) return [];
		const target = chooseTarget(rows, known);
		const said = describeByArm(rows.map(({ arm, trials }) => ({ arm, value: `${trials ?? 0}` })));
		return [
			{
				key: `unequal-trials:v${index + 1}`,
				code: 'unequal-trials',
				place: { visit: index + 1 },
				field: `visits.${index}.blocks`,
				numbers: {
					trials: Object.fromEntries(rows.map(({ arm, trials }) => [arm.key, trials])),
					apart,
					limit: DESIGN_LIMITS.trialsApart
				},
				severity: 'serious',
				text: `${nameVisit(visit, index)}: ${said} trials, ${writeCount(apart, 'trial')} apart. Arms that practise more than others differ in more than what is studied.`,
				repair: {
					label: `Give every arm ${writeCount(target, 'trial')}`,
					operations: listBlockLists(design, visit).flatMap(
						({ list, blocks }): DesignOperation[] =>
							countTrials(blocks) === target
								? []
								: [
										{
											...{ kind: 'set-blocks', visit: index, arm: list },
											blocks: bringTo(blocks, target)
										}
									]
					)
				}
			}
		];
	});

function countTrials(blocks: readonly DesignBlock[]): number {
	return sum(blocks.map(({ trials }) => trials ?? 0));
}

function countKnown({ blocks }: ArmVisit): number | null {
	const isKnown = blocks.every(({ purpose, trials }) => purpose === 'rest' || trials !== null);
	return isKnown ? countTrials(blocks) : null;
}

/** Adaptive time has one length, so other arms come to it; without it, nobody loses trials. */
function chooseTarget(
	rows: readonly (ArmVisit & { trials: number | null })[],
	known: readonly number[]
): number {
	const adaptive = rows.filter(({ blocks }) =>
		blocks.some(({ purpose }) => purpose === 'adaptive')
	);
	const fixed = new Set(adaptive.map(({ trials }) => trials ?? 0));
	const [only] = fixed;
	return fixed.size === 1 && only !== undefined && only > 0 ? only : Math.max(...known);
}

const ELASTIC = ['practice', 'washout', 'shift', 'region'] as const;

function bringTo(blocks: readonly DesignBlock[], target: number): DesignBlock[] {
	const missing = target - countTrials(blocks);
	return missing > 0 ? addTrials(blocks, missing) : takeTrials(blocks, -missing);
}

function addTrials(blocks: readonly DesignBlock[], count: number): DesignBlock[] {
	const at = blocks.findLastIndex((block) => isElastic(block));
	const last = blocks.at(-1);
	if (at >= 0) {
		return blocks.map((block, i) =>
			i === at ? { ...block, trials: (block.trials ?? 0) + count } : block
		);
	}
	const added = plainDesignBlock('practice', count);
	return [
		...blocks,
		{ ...added, restBetweenTrialsSeconds: last?.restBetweenTrialsSeconds ?? null }
	];
}

/** From the end: first what can be shortened, then whole blocks. */
function takeTrials(blocks: readonly DesignBlock[], count: number): DesignBlock[] {
	let left = count;
	return blocks
		.toReversed()
		.flatMap((block): DesignBlock[] => {
			const trials = block.trials ?? 0;
			if (block.purpose === 'rest' || block.purpose === 'adaptive') return [block];
			const taken = Math.min(left, trials);
			left -= taken;
			if (taken === 0) return [block];
			return taken === trials ? [] : [shorten(block, trials - taken)];
		})
		.reverse();
}

function shorten(block: DesignBlock, trials: number): DesignBlock {
	const { warmUpTrials } = block;
	return {
		...block,
		trials,
		warmUpTrials: warmUpTrials === null ? null : Math.min(warmUpTrials, trials)
	};
}

function isElastic({ purpose }: DesignBlock): boolean {
	return ELASTIC.some((one) => one === purpose);
}
