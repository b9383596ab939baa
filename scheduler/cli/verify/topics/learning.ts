import type { TopicGroup } from '../topic.ts';

/** Learners and learning curves in check cases. */
export const LEARNING_TOPICS: TopicGroup = {};
