import type { ProtocolLine } from './describe-protocol';
import type { VisitPlan } from '$scheduler/protocol/visit-plan';
import { countTrials } from './visit-name';

/** One line a visit: blocks, trials, minutes, and the hours since the visit before. */
export function describeVisits(visits: readonly VisitPlan[]): ProtocolLine[] {
	return visits.map((visit) => ({
		key: `visit-${visit.number}`,
		term: visit.label,
		text: [
			visit.kind,
			`${describeBlocks(visit.blocks)} (${countTrials(visit)} trials)`,
			`${visit.minutes} min with ${visit.setupMinutes} min set-up and ${visit.cleanupMinutes} min clean-up`,
			describeGap(visit.gapBefore)
		]
			.filter(Boolean)
			.join('; ')
	}));
}

/** '4 adaptive blocks of 60', runs of equal blocks told together. */
export function describeBlocks(blocks: VisitPlan['blocks']): string {
	const runs: { purpose: string; trials: number; count: number }[] = [];
	for (const { purpose, trials } of blocks) {
		const last = runs.at(-1);
		if (last?.purpose === purpose && last.trials === trials) last.count += 1;
		else runs.push({ purpose, trials, count: 1 });
	}
	return runs
		.map(({ purpose, trials, count }) =>
			count === 1 ? `1 ${purpose} block of ${trials}` : `${count} ${purpose} blocks of ${trials}`
		)
		.join(', ');
}

/** '24 h (20 to 28), 1 night between'; empty for the first visit. */
export function describeGap(gap: VisitPlan['gapBefore']): string {
	if (!gap) return '';
	const nights = gap.nightsBetween === 1 ? '1 night' : `${gap.nightsBetween} nights`;
	return `${gap.targetHours} h after the one before (${gap.minHours} to ${gap.maxHours}), at least ${nights} between`;
}
