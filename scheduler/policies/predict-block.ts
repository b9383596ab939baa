import { computeCatchInterval } from '../perturbations/escape-statistics.ts';
import type { Decision } from './decision.ts';

/** What the engine expects of the block it chose; shares are of its trials. */
export type Prediction =
	| {
			readonly about: 'region';
			/** Share caught by the region at first, with the interval a block of this length leaves it. */
			readonly catchShare: number;
			readonly catchLow: number;
			readonly catchHigh: number;
			/** Hits outside the region if the person does not move, and at the intended exit. */
			readonly stayShare: number;
			readonly exitShare: number | null;
			/** Way to the nearest exit, in own SD along the solutions. */
			readonly reachSd: number | null;
	  }
	| {
			readonly about: 'shift';
			/** Level at the start of the block and the level to reach, in the unit of the result. */
			readonly level: number;
			readonly goal: number;
			readonly hitShare: number;
	  }
	| {
			readonly about: 'plain';
			/** As in the last cloud. */
			readonly hitShare: number;
			readonly meanError: number;
	  }
	| { readonly about: 'nothing' };

/** What to expect of the next block (method sheet D4, log: predicted). */
export function predictBlock({ kind, parameters, memory }: Omit<Decision, 'ladder'>): Prediction {
	const { region, rule } = parameters;
	const trialCount = parameters.trials ?? 0;
	if (kind === 'region' && region && trialCount > 0) {
		const catchShare = region.catch ?? region.share;
		const { low, high } = computeCatchInterval(catchShare, trialCount);
		return {
			...{ about: 'region', catchShare, catchLow: low, catchHigh: high },
			stayShare: region.stay,
			exitShare: region.nearestSuccess ?? null,
			reachSd: region.reachSd ?? null
		};
	}
	if (kind === 'shift' && rule)
		return {
			...{ about: 'shift', level: parameters.level ?? 0, goal: rule.goal, hitShare: rule.hit0 }
		};
	const isNoBlock = kind === 'stop' || kind === 'hold' || kind === 'rest' || kind === 'wait';
	if (isNoBlock || !memory.cloud) return { about: 'nothing' };
	return { about: 'plain', hitShare: memory.cloud.hit, meanError: memory.cloud.cost };
}
