import { entry, type Vector } from '../linear-algebra/vector.ts';

export interface RewardLearning {
	/** Part of the exploration that a success adds to the aim. */
	readonly rate: number;
	/** Whether exploration goes on after a success. */
	readonly explore: 'always' | 'after-failure';
}

/**
 * A learner that knows only whether it succeeded: exploration that was rewarded is kept.
 *
 * Shapes:  exploration and motorNoise (n); aims (n + 1), rewards (n).
 * Units:   those of the aim.
 * Method:  y = aim + ε + η; the aim moves by rate·ε after a success. The learner knows ε, never η.
 * Source:  method sheet C (Noise); case reward-keep.
 * @throws {RangeError} lists of unequal length
 */
export function simulateRewardLearning(
	options: RewardLearning & {
		start: number;
		exploration: Vector;
		motorNoise: Vector;
		/** Lowest and highest rewarded outcome. */
		rewardZone: readonly [number, number];
		wasRewarded: boolean;
	}
): { aims: number[]; rewards: boolean[] } {
	const { rate, explore, exploration, motorNoise, rewardZone } = options;
	if (exploration.length !== motorNoise.length)
		throw new RangeError('exploration and motorNoise must be of one length');
	const aims = [options.start];
	let [aim, before] = [options.start, options.wasRewarded];
	const rewards = exploration.map((planned, i) => {
		const tried = explore === 'always' || !before ? planned : 0;
		const outcome = aim + tried + entry(motorNoise, i);
		const isRewarded = rewardZone[0] <= outcome && outcome <= rewardZone[1];
		if (isRewarded) aim += rate * tried;
		aims.push(aim);
		before = isRewarded;
		return isRewarded;
	});
	return { aims, rewards };
}
