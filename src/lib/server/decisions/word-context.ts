import { policySettingsSchema } from '$scheduler/policies/policy-settings';
import type { WordContext } from '$scheduler/policies/words/read-values';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { taskRecordSchema } from '$scheduler/tasks/task-record';

/** What the words of a reason depend on: the unit of results and the settings of the policy. */
export function createWordContext({ task, policy }: ProtocolContent): WordContext {
	const { resultUnit } = taskRecordSchema.parse(task);
	return { resultUnit, settings: policySettingsSchema.parse(policy) };
}
