import { readClockText } from './clock-text';
import type { BlockDraft, VisitDraft } from './draft-parts';
import { emptyAnalysis } from './empty-parts';
import type { ProtocolDraft } from './protocol-draft';

/**
 * A draft in the shape of the document that is frozen, as far as it is typed: numbers that are missing
 * stay null. What nobody has declared is left out.
 */
export function buildContent(draft: ProtocolDraft) {
	const { booking, comparison, visits, guardRails } = draft;
	return {
		format: 1,
		arms: draft.arms.map(({ master, ...arm }) => (master === null ? arm : { ...arm, master })),
		visits: visits.map(buildVisit),
		booking: {
			earliestMinute: readClockText(booking.earliest),
			latestMinute: readClockText(booking.latest),
			sameTimeToleranceMinutes: booking.sameTimeToleranceMinutes,
			weekdays: [...booking.weekdays].sort((a, b) => a - b),
			pauses: {
				...booking.pauses,
				minHours: booking.pauses.minHours ?? 0,
				maxHours: booking.pauses.maxHours ?? 0
			},
			...(booking.dayMeaning === 'clock-time' ? { dayMeaning: booking.dayMeaning } : {})
		},
		guardRails: { ...guardRails, fallback: 'practice' },
		readyLeadHours: draft.readyLeadHours,
		invitationDelayHours: draft.invitationDelayHours,
		earliestStartHours: draft.earliestStartHours,
		comparison: draft.arms.length > 1 ? comparison : null,
		limits: buildLimits(draft.limits),
		consentTextVersion: draft.consentTextVersion,
		variants: draft.variants,
		...buildLaterParts(draft)
	};
}

function buildVisit({ armBlocks, ...visit }: VisitDraft, index: number) {
	const own = Object.entries(armBlocks).map(([arm, blocks]) => [arm, blocks.map(buildBlock)]);
	return {
		...visit,
		number: index + 1,
		gapBefore: index === 0 ? null : visit.gapBefore,
		blocks: visit.blocks.map(buildBlock),
		...(own.length > 0 ? { armBlocks: Object.fromEntries(own) } : {})
	};
}

function buildBlock({ purpose, trials, ...settings }: BlockDraft, index: number) {
	const said = Object.entries(settings).filter(([, value]) => value !== null && value !== '');
	return {
		...{ number: index + 1, purpose, trials: purpose === 'rest' ? 0 : trials },
		...Object.fromEntries(said)
	};
}

function buildLimits({
	variableMax,
	shiftMax,
	penaltyShareMax,
	...limits
}: ProtocolDraft['limits']) {
	const said = Object.entries(variableMax).filter(([, value]) => value !== null);
	return {
		...limits,
		...(said.length > 0 ? { variableMax: Object.fromEntries(said) } : {}),
		...(shiftMax === null ? {} : { shiftMax }),
		...(penaltyShareMax === null ? {} : { penaltyShareMax })
	};
}

function buildLaterParts(draft: ProtocolDraft) {
	const { trialSeconds, missedDay, relaxation, instructions, analysis } = draft;
	const isYoked = draft.arms.some(({ rule }) => rule === 'yoked');
	const isPlanned = JSON.stringify(analysis) !== JSON.stringify(emptyAnalysis());
	const justifications = Object.entries(draft.justifications).filter(
		([, why]) => why.trim() !== ''
	);
	return {
		...(trialSeconds === null ? {} : { trialSeconds }),
		...(isYoked ? { yoking: draft.yoking } : {}),
		...(missedDay ? { missedDay } : {}),
		...(relaxation.length > 0 ? { relaxation } : {}),
		...(instructions.length > 0 ? { instructions } : {}),
		...(isPlanned ? { analysis } : {}),
		...(justifications.length > 0 ? { justifications: Object.fromEntries(justifications) } : {})
	};
}
