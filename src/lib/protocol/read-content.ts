import { equaliseBlockLengths, policySettingsSchema } from '$scheduler/policies/policy-settings';
import { buildContent } from './build-content';
import { buildPolicy } from './build-policy';
import type { Fault } from './fault';
import { hasAdaptiveTime } from './has-adaptive-time';
import { protocolContentSchema, type ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { ProtocolDraft } from './protocol-draft';
import { readTaskDraft } from '../tasks/task-draft';

export type ReadContent = { ok: true; content: ProtocolContent } | { ok: false; faults: Fault[] };

/** A finished draft as the document that is frozen, with every value of the policy written out. */
export function readContent(draft: ProtocolDraft): ReadContent {
	const task = readTaskDraft(draft.task);
	const policy = policySettingsSchema.safeParse(buildPolicy(draft));
	const content = protocolContentSchema.safeParse({
		...buildContent(draft),
		task: task.ok ? task.record : {},
		policy: hasAdaptiveTime(draft) && policy.data ? equaliseBlockLengths(policy.data) : {}
	});
	const faults = [
		...(task.ok ? [] : task.faults.map((fault) => ({ ...fault, field: `task.${fault.field}` }))),
		...toFaults('Policy', policy.error?.issues),
		...toFaults('Protocol', content.error?.issues)
	];
	return content.success && faults.length === 0
		? { ok: true, content: content.data }
		: { ok: false, faults };
}

function toFaults(
	place: string,
	issues: readonly { path: PropertyKey[]; message: string }[] = []
): Fault[] {
	return issues.map(({ path, message }) => ({
		code: 'not-readable',
		level: 'fault',
		place: [place, ...path.map(String)].join(', '),
		field: path.join('.'),
		text: `${message}.`,
		remedy: 'Correct this value.'
	}));
}
