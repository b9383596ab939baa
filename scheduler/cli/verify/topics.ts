import type { Topic, TopicGroup } from './topic.ts';
import { ALLOCATION_TOPICS } from './topics/allocation.ts';
import { LEARNING_TOPICS } from './topics/learning.ts';
import { POLICY_TOPICS } from './topics/policies.ts';
import { STATISTICS_TOPICS } from './topics/statistics.ts';
import { TASK_TOPICS } from './topics/tasks.ts';
import { VARIABILITY_TOPICS } from './topics/variability.ts';

const GROUPS: readonly TopicGroup[] = [
	TASK_TOPICS,
	VARIABILITY_TOPICS,
	POLICY_TOPICS,
	LEARNING_TOPICS,
	STATISTICS_TOPICS,
	ALLOCATION_TOPICS
];

/** Every topic with the names of the inputs that it knows, one line a kind of case. */
export function describeTopics(): string {
	const lines = GROUPS.flatMap((group) =>
		Object.entries(group).flatMap(([name, { forms = [] }]) => [
			`  ${name}`,
			...forms.map((form) => `      ${form}`)
		])
	);
	return `Topics and the inputs of their cases; those in brackets may be missing\n${lines.join('\n')}\n`;
}

/** Everything that computes cases of a topic; two parts of the engine may share one. */
export function findTopics(name: string): Topic[] {
	return GROUPS.flatMap((group) => {
		const topic = Object.hasOwn(group, name) ? group[name] : undefined;
		return topic ? [topic] : [];
	});
}
