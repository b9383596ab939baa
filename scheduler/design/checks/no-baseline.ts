import { findCloudTrials } from '../design-policy.ts';
import { plainDesignBlock, type Design, type DesignArm, type DesignBlock } from '../design.ts';
import type { Check } from '../finding.ts';
import type { DesignOperation } from '../repair.ts';
import { describeByArm, joinWords, listBlockLists, nameArm, writeCount } from '../walk-design.ts';

/** Trials of a baseline block that a repair puts in: the usual length of a block. */
const USUAL_TRIALS = 60;

/** Arms that begin to practise before enough is known of the people in them. */
export const checkBaseline: Check = (design) => {
	const limit = findCloudTrials(design);
	const rows = design.arms.flatMap((arm) => {
		const trials = countBefore(design, arm);
		return trials === null || trials >= limit ? [] : [{ arm, trials }];
	});
	if (rows.length === 0 || design.visits.length === 0) return [];
	const said = describeByArm(rows.map(({ arm, trials }) => ({ arm, value: `${trials}` })));
	const poor = new Set(rows.map(({ arm }) => arm.key));
	return [
		{
			key: 'no-baseline',
			code: 'no-baseline',
			place: { visit: 1 },
			field: 'visits.0.blocks',
			numbers: { trials: Object.fromEntries(rows.map((row) => [row.arm.key, row.trials])), limit },
			severity: 'serious',
			text: `Baseline trials before the first practice: ${said}; a cloud of this task needs ${limit}. Without a baseline nobody’s change can be told.`,
			repair: {
				label: `Begin ${joinWords(rows.map(({ arm }) => nameArm(arm)))} with ${writeCount(Math.max(USUAL_TRIALS, limit), 'baseline trial')}`,
				operations: insertBaseline(design, poor, Math.max(USUAL_TRIALS, limit))
			}
		}
	];
};

/** Baseline trials before anything else is practised; null: nothing is, or a number is missing. */
function countBefore(design: Design, { key }: DesignArm): number | null {
	let trials = 0;
	for (const visit of design.visits) {
		for (const block of visit.armBlocks[key] ?? visit.blocks) {
			if (block.purpose === 'baseline') {
				if (block.trials === null) return null;
				trials += Math.max(0, block.trials - (block.warmUpTrials ?? 0));
			} else if (isPractice(block)) return trials;
		}
	}
	return null;
}

function isPractice({ purpose }: DesignBlock): boolean {
	return !['rest', 'baseline', 'probe'].includes(purpose);
}

function insertBaseline(
	design: Design,
	poor: ReadonlySet<string>,
	trials: number
): DesignOperation[] {
	const [visit] = design.visits;
	if (!visit) return [];
	return listBlockLists(design, visit)
		.filter(({ arms }) => arms.some(({ key }) => poor.has(key)))
		.map(({ list, blocks }) => {
			const at = blocks.findIndex(({ purpose }) => purpose === 'baseline');
			const isFirst = blocks.slice(0, Math.max(0, at)).every((block) => !isPractice(block));
			const longer = blocks.map((block, i) =>
				i === at ? { ...block, trials: trials + (block.warmUpTrials ?? 0) } : block
			);
			return {
				...{ kind: 'set-blocks', visit: 0, arm: list },
				blocks: at >= 0 && isFirst ? longer : [plainDesignBlock('baseline', trials), ...blocks]
			};
		});
}
