import { policySettingsSchema } from '$scheduler/policies/policy-settings';
import type { ProtocolLine, ProtocolPart } from './protocol-line';
import { hasAdaptiveTime } from './has-adaptive-time';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { writePercent } from './write-percent';

/** What practice aims at in the adaptive arm. */
export function describeAims(content: ProtocolContent): ProtocolPart {
	const part = { key: 'aims', title: 'Aims of adaptive blocks' };
	if (!hasAdaptiveTime(content)) return { ...part, lines: [] };
	const parsed = policySettingsSchema.safeParse(content.policy);
	if (!parsed.success) return { ...part, lines: [] };
	const { aims, settle, blockTrials } = parsed.data;
	const lines: ProtocolLine[] = [];
	if (aims.region) {
		lines.push({
			key: 'region',
			term: 'Penalized regions',
			text: `${writePercent(aims.region.share)} of the perturbed trials, until ${aims.region.escapes} regions are escaped`,
			tells: ['policy.aims.region.share', 'policy.aims.region.escapes']
		});
	}
	if (aims.shift) {
		lines.push({
			key: 'shift',
			term: 'Target shift',
			text: `${writePercent(aims.shift.share)} of the perturbed trials, until the target has moved ${aims.shift.goal} SD of the person’s own result`,
			tells: ['policy.aims.shift.share', 'policy.aims.shift.goal']
		});
	}
	lines.push(
		{
			key: 'settle',
			term: 'Before the first challenge',
			text: `${settle.minBlocks} plain blocks at least, ${settle.maxBlocks} at most`,
			tells: ['policy.settle.minBlocks', 'policy.settle.maxBlocks']
		},
		{
			key: 'length',
			term: 'Every adaptive block',
			text: `${blockTrials} trials, whatever its kind`,
			tells: ['policy.blockTrials']
		}
	);
	return { ...part, lines };
}

/** What the rule may do by itself, and what waits for the approver. */
export function describeGuardRails(content: ProtocolContent): ProtocolPart {
	const { automaticCoverMax, automaticReachSdMax } = content.guardRails;
	const lines: ProtocolLine[] = [
		{
			key: 'cover',
			term: 'Held, cover',
			text: `a region covering more than ${writePercent(automaticCoverMax)} of the ways to be right`,
			tells: ['guardRails.automaticCoverMax']
		},
		{
			key: 'reach',
			term: 'Held, reach',
			text: `a way out further than ${automaticReachSdMax} of the person’s own SD`,
			tells: ['guardRails.automaticReachSdMax']
		},
		{
			key: 'fallback',
			term: 'Not settled in time',
			text: 'plain practice is issued and recorded',
			tells: ['guardRails.fallback']
		}
	];
	return {
		key: 'guard-rails',
		title: 'What is held for the approver',
		lines: hasAdaptiveTime(content) ? lines : []
	};
}
