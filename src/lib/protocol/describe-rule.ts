import { policySettingsSchema } from '$scheduler/policies/policy-settings';
import type { ProtocolLine, ProtocolPart } from './describe-protocol';
import { hasAdaptiveTime } from './has-adaptive-time';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';

/** What practice aims at in the adaptive arm. */
export function describeAims(content: ProtocolContent): ProtocolPart {
	const part = { key: 'aims', title: 'Aims of adaptive blocks' };
	if (!hasAdaptiveTime(content)) return { ...part, lines: [] };
	const { aims, settle, blockTrials } = policySettingsSchema.parse(content.policy);
	const percent = (share: number) => `${Math.round(share * 100)} %`;
	const lines: ProtocolLine[] = [];
	if (aims.region) {
		lines.push({
			key: 'region',
			term: 'Penalized regions',
			text: `${percent(aims.region.share)} of the perturbed trials, until ${aims.region.escapes} regions are escaped`
		});
	}
	if (aims.shift) {
		lines.push({
			key: 'shift',
			term: 'Target shift',
			text: `${percent(aims.shift.share)} of the perturbed trials, until the target has moved ${aims.shift.goal} SD of the person’s own result`
		});
	}
	lines.push(
		{
			key: 'settle',
			term: 'Before the first challenge',
			text: `${settle.minBlocks} plain blocks at least, ${settle.maxBlocks} at most`
		},
		{
			key: 'length',
			term: 'Every adaptive block',
			text: `${blockTrials} trials, whatever its kind`
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
			text: `a region covering more than ${Math.round(automaticCoverMax * 100)} % of the ways to be right`
		},
		{
			key: 'reach',
			term: 'Held, reach',
			text: `a way out further than ${automaticReachSdMax} of the person’s own SD`
		},
		{
			key: 'fallback',
			term: 'Not settled in time',
			text: 'plain practice is issued and recorded'
		}
	];
	return {
		key: 'guard-rails',
		title: 'What is held for the approver',
		lines: hasAdaptiveTime(content) ? lines : []
	};
}
