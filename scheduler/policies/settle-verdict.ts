import { dot, entry } from '../linear-algebra/vector.ts';
import { computeMean } from '../variability/moments.ts';
import type { BlockSummary } from './policy-memory.ts';
import type { PolicySettings } from './policy-settings.ts';

export type SettleVerdict = 'FIRST-BLOCKS' | 'UNDECIDED' | 'IMPROVING' | 'WORSENING' | 'STEADY';

export interface SettleFacts {
	readonly verdict: SettleVerdict;
	readonly blocks: number;
	/** Change of the mean error over the blocks, in SD of a trial, and its standard error. */
	readonly changeSd?: number;
	readonly se?: number;
}

/** Keeps the weights finite when every trial of a block missed by the same amount. */
const VARIANCE_FLOOR = 1e-200;

/**
 * Whether the mean error has stopped changing over the last plain blocks.
 *
 * Method:  weighted straight line through the block means; weights 1/v, v = s²/n·(1 + r)/(1 − r).
 * Source:  method sheet D0 (Settled).
 */
export function judgeSettling(
	plain: readonly BlockSummary[],
	settings: PolicySettings['settle']
): SettleFacts {
	const used = plain.slice(-settings.use);
	const blocks = used.length;
	if (blocks < settings.minBlocks) return { verdict: 'FIRST-BLOCKS', blocks };
	if (blocks < 2) return { verdict: 'UNDECIDED', blocks };
	const { change: changeSd, se } = fitChange(used);
	return { verdict: judge(changeSd, settings.z * se, settings.margin), blocks, changeSd, se };
}

function judge(change: number, reach: number, margin: number): SettleVerdict {
	if (change + reach < 0) return 'IMPROVING';
	if (change - reach > 0) return 'WORSENING';
	return Math.abs(change) + reach <= margin ? 'STEADY' : 'UNDECIDED';
}

/** Slope over all blocks and its standard error, both in pooled SD of a trial. */
function fitChange(used: readonly BlockSummary[]): { change: number; se: number } {
	const r = computeMean(used.map((block) => block.r));
	const weights = used.map(({ costSd, n }) => {
		const variance = Math.max(costSd ** 2, VARIANCE_FLOOR) / n;
		return 1 / ((variance * (1 + r)) / (1 - r));
	});
	const total = weights.reduce((sum, weight) => sum + weight, 0);
	const center = dot(
		weights,
		used.map((_, i) => i)
	);
	const time = used.map((_, i) => i - center / total);
	const sxx = dot(
		weights,
		time.map((x) => x * x)
	);
	const moment = used.reduce(
		(sum, { cost }, i) => sum + entry(weights, i) * entry(time, i) * cost,
		0
	);
	const trialSd = Math.sqrt(
		computeMean(used.map(({ costSd }) => Math.max(costSd ** 2, VARIANCE_FLOOR)))
	);
	const span = used.length - 1;
	return {
		change: ((moment / sxx) * span) / trialSd,
		se: span / Math.sqrt(sxx) / trialSd
	};
}
