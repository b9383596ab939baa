import { checkDesign } from '$scheduler/design/check-design';
import { designSchema, type Design } from '$scheduler/design/design';
import type { CheckContext, Finding } from '$scheduler/design/finding';
import { buildContent } from '../build-content';
import { buildPolicy } from '../build-policy';
import { hasAdaptiveTime } from '../has-adaptive-time';
import type { ProtocolDraft } from '../protocol-draft';
import { readTask } from '../read-task';

/** A draft as the checker reads it: its content as far as it is written, with task and policy. */
export function buildDesign(draft: ProtocolDraft): Design {
	return designSchema.parse({
		...buildContent(draft),
		task: readTask(draft.task) ?? draft.task,
		policy: hasAdaptiveTime(draft) ? buildPolicy(draft) : {}
	});
}

/** What the checker finds in a draft; the same function runs on the command line. */
export function checkDraft(draft: ProtocolDraft, context?: CheckContext): Finding[] {
	return checkDesign(buildDesign(draft), context);
}
