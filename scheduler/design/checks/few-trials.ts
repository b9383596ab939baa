import {
	findCloudTrials,
	findDecisionTrials,
	isPolicyAtWork,
	readPolicy
} from '../design-policy.ts';
import type { Design, DesignBlock } from '../design.ts';
import type { Check } from '../finding.ts';
import type { DesignOperation } from '../repair.ts';
import { blockPath, listBlockLists, writeCount } from '../walk-design.ts';

/** Blocks of adaptive time that are too short for the policy to decide anything by them. */
export const checkDecisionTrials: Check = (design) => {
	if (!isPolicyAtWork(design)) return [];
	const policy = readPolicy(design);
	const limit = findDecisionTrials(design, policy);
	const adaptive = listAdaptive(design);
	const short = adaptive.filter(({ block }) => {
		const used = countUsed(block);
		return used !== null && used < limit;
	});
	const [first] = short;
	if (!first) return [];
	const fewest = Math.min(...short.map(({ block }) => countUsed(block) ?? Infinity));
	const cloud = findCloudTrials(design);
	const warmUp = Math.max(...adaptive.map(({ block }) => block.warmUpTrials ?? 0));
	const why =
		fewest < cloud
			? `a person’s cloud needs ${cloud}`
			: `the spread of the result must be known from ${policy?.shift.minPlain ?? 0} trials in three blocks, so ${limit} a block`;
	return [
		{
			key: 'few-trials',
			code: 'few-trials',
			place: { visit: first.visit + 1, block: first.at + 1 },
			field: [...blockPath(first.visit, first.list, first.at), 'trials'].join('.'),
			numbers: { trials: fewest, limit, blocks: short.length },
			severity: 'serious',
			text: `${writeCount(short.length, 'block')} of adaptive time with ${writeCount(fewest, 'trial')} after warm-up: ${why}. The scheduler would repeat blocks instead of deciding.`,
			repair: {
				label: `Give every block of adaptive time ${limit + warmUp} trials`,
				operations: adaptive.map(({ visit, list, at }): DesignOperation => ({
					...{ kind: 'set-value', path: [...blockPath(visit, list, at), 'trials'] },
					value: limit + warmUp
				}))
			}
		}
	];
};

function countUsed({ trials, warmUpTrials }: DesignBlock): number | null {
	return trials === null ? null : trials - (warmUpTrials ?? 0);
}

function listAdaptive(design: Design) {
	return design.visits.flatMap((entry, visit) =>
		listBlockLists(design, entry).flatMap(({ list, blocks }) =>
			blocks.flatMap((block, at) =>
				block.purpose === 'adaptive' ? [{ visit, list, at, block }] : []
			)
		)
	);
}
