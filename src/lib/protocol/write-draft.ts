import { policySettingsSchema } from '$scheduler/policies/policy-settings';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import { writeClockText } from './clock-text';
import type { ProtocolContent } from './protocol-content';
import type { ProtocolDraft } from './protocol-draft';

const hasOwnField = new Set([
	'aims',
	'blockTrials',
	'probeTrials',
	'washoutTrials',
	'retentionTrials',
	'recoveryTrials'
]);

/**
 * A frozen version as a draft to go on from; `blank` fills what its kind of task leaves open. Null
 * for a task that the forms cannot hold.
 */
export function writeDraft(content: ProtocolContent, blank: ProtocolDraft): ProtocolDraft | null {
	const task = writeTaskDraft(content, blank);
	if (!task) return null;
	const { booking, comparison, visits } = content;
	const { policy } = content;
	const parsed = policySettingsSchema.safeParse(policy);
	const settings = parsed.success ? parsed.data : policySettingsSchema.parse({});
	const { region, shift } = settings.aims;
	return {
		format: 1,
		task,
		arms: content.arms,
		visits: visits.map(
			({ label, kind, minutes, setupMinutes, cleanupMinutes, gapBefore, blocks }) => ({
				label,
				kind,
				minutes,
				setupMinutes,
				cleanupMinutes,
				gapBefore: gapBefore ?? { minHours: 20, targetHours: 24, maxHours: 28, nightsBetween: 1 },
				blocks: blocks.map(({ purpose, trials }) => ({ purpose, trials }))
			})
		),
		booking: {
			earliest: writeClockText(booking.earliestMinute),
			latest: writeClockText(booking.latestMinute),
			sameTimeToleranceMinutes: booking.sameTimeToleranceMinutes,
			weekdays: booking.weekdays,
			pauses: booking.pauses
		},
		aims: {
			region: {
				isOn: region !== undefined,
				share: region?.share ?? 0.5,
				escapes: region?.escapes ?? 3
			},
			shift: { isOn: shift !== undefined, share: shift?.share ?? 0.5, goal: shift?.goal ?? 3 }
		},
		settle: { minBlocks: settings.settle.minBlocks, maxBlocks: settings.settle.maxBlocks },
		otherPolicy: Object.fromEntries(
			Object.entries(policy).filter(([key]) => !hasOwnField.has(key))
		),
		guardRails: {
			automaticCoverMax: content.guardRails.automaticCoverMax,
			automaticReachSdMax: content.guardRails.automaticReachSdMax
		},
		readyLeadHours: content.readyLeadHours,
		invitationDelayHours: content.invitationDelayHours,
		earliestStartHours: content.earliestStartHours,
		comparison: { ...blank.comparison, ...comparison },
		limits: content.limits,
		consentTextVersion: content.consentTextVersion,
		variants: content.variants
	};
}

function writeTaskDraft(
	{ task }: ProtocolContent,
	{ task: blank }: ProtocolDraft
): ProtocolDraft['task'] | null {
	const record = taskRecordSchema.parse(task);
	if (record.type === 'puck') {
		const { mu, g, D, tolerance, variables } = record;
		return { ...blank, type: 'puck', puck: { mu, g, D, tolerance, variables } };
	}
	if (record.type === 'formula') {
		const { formula, resultUnit, tolerance, variables } = record;
		return { ...blank, type: 'formula', formula: { formula, resultUnit, tolerance, variables } };
	}
	return null;
}
