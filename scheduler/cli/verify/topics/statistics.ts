import type { TopicGroup } from '../topic.ts';

/** Distributions, tests, power and mixed models in check cases. */
export const STATISTICS_TOPICS: TopicGroup = {};
