import type { TopicGroup } from '../topic.ts';

/** Allocation in check cases. */
export const ALLOCATION_TOPICS: TopicGroup = {};
