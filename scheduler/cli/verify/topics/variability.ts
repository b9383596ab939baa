import type { TopicGroup } from '../topic.ts';
import { CLOUD_TOPICS } from './variability/clouds.ts';
import { ESTIMATE_TOPICS } from './variability/estimates.ts';
import { GOAL_TOPICS } from './variability/goal.ts';
import { IMPROVEMENT_TOPICS } from './variability/improvement.ts';
import { STRUCTURE_TOPICS } from './variability/structure.ts';

/** Clouds of trials in check cases. */
export const VARIABILITY_TOPICS: TopicGroup = {
	...CLOUD_TOPICS,
	...ESTIMATE_TOPICS,
	...GOAL_TOPICS,
	...IMPROVEMENT_TOPICS,
	...STRUCTURE_TOPICS
};
