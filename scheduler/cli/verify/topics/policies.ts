import type { TopicGroup } from '../topic.ts';

/** Policies in check cases. */
export const POLICY_TOPICS: TopicGroup = {};
