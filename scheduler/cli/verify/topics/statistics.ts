import type { TopicGroup } from '../topic.ts';
import { ANALYSIS, INTERVALS, MULTIPLICITY } from './statistics/inference.ts';
import { MIXED_MODEL } from './statistics/mixed-model.ts';
import { POWER } from './statistics/power.ts';
import { QUANTILES } from './statistics/quantiles.ts';
import { GROUP_SEQUENTIAL, REESTIMATION } from './statistics/sequential.ts';

/** Distributions, tests, power and mixed models in check cases. */
export const STATISTICS_TOPICS: TopicGroup = {
	quantiles: QUANTILES,
	power: POWER,
	multiplicity: MULTIPLICITY,
	interval: INTERVALS,
	analysis: ANALYSIS,
	'mixed-model': MIXED_MODEL,
	'group-sequential': GROUP_SEQUENTIAL,
	ssr: REESTIMATION
};
