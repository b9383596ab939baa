import { policySettingsSchema } from '$scheduler/policies/policy-settings';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import type { BlockPlan } from '$scheduler/protocol/block-plan';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { VisitPlan } from '$scheduler/protocol/visit-plan';
import { writeTaskDraft } from '../tasks/task-draft';
import { writeClockText } from './clock-text';
import { blockDraftSchema, limitsDraftSchema, type VisitDraft } from './draft-parts';
import { emptyAnalysis, usualYoking } from './empty-parts';
import type { ProtocolDraft } from './protocol-draft';

const hasOwnField = new Set([
	'aims',
	'blockTrials',
	'probeTrials',
	'washoutTrials',
	'retentionTrials',
	'recoveryTrials'
]);

/** A frozen version as a draft to go on from; `blank` fills what it leaves open. */
export function writeDraft(content: ProtocolContent, blank: ProtocolDraft): ProtocolDraft {
	const task = writeTaskDraft(taskRecordSchema.parse(content.task));
	const { booking, comparison, visits } = content;
	const { policy } = content;
	const parsed = policySettingsSchema.safeParse(policy);
	const settings = parsed.success ? parsed.data : policySettingsSchema.parse({});
	const { region, shift } = settings.aims;
	return {
		format: 1,
		task,
		arms: content.arms.map((arm) => ({ ...arm, master: arm.master ?? null })),
		visits: visits.map(writeVisit),
		booking: {
			earliest: writeClockText(booking.earliestMinute),
			latest: writeClockText(booking.latestMinute),
			sameTimeToleranceMinutes: booking.sameTimeToleranceMinutes,
			weekdays: booking.weekdays,
			pauses: booking.pauses,
			dayMeaning: booking.dayMeaning ?? 'elapsed-hours'
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
		limits: limitsDraftSchema.parse(content.limits),
		consentTextVersion: content.consentTextVersion,
		variants: content.variants,
		trialSeconds: content.trialSeconds ?? null,
		yoking: content.yoking ?? { ...usualYoking },
		missedDay: content.missedDay ?? null,
		relaxation: content.relaxation ?? [],
		instructions: content.instructions ?? [],
		analysis: content.analysis ?? emptyAnalysis(),
		justifications: content.justifications ?? {}
	};
}

function writeVisit({ number: _number, armBlocks, gapBefore, ...visit }: VisitPlan): VisitDraft {
	const write = (blocks: readonly BlockPlan[]) =>
		blocks.map(({ number: _place, ...block }) => blockDraftSchema.parse(block));
	return {
		...visit,
		gapBefore: gapBefore ?? { minHours: 20, targetHours: 24, maxHours: 28, nightsBetween: 1 },
		blocks: write(visit.blocks),
		armBlocks: Object.fromEntries(
			Object.entries(armBlocks ?? {}).map(([arm, blocks]) => [arm, write(blocks)])
		)
	};
}
