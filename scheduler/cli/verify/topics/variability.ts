import type { TopicGroup } from '../topic.ts';

/** Clouds of trials in check cases. */
export const VARIABILITY_TOPICS: TopicGroup = {};
