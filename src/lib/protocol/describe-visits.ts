import type { BlockPlan } from '$scheduler/protocol/block-plan';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { VisitPlan } from '$scheduler/protocol/visit-plan';
import { describeBlocks, listBlockPaths } from './describe-blocks';
import { pathsIn, type ProtocolLine, type Reader } from './protocol-line';
import { countTrials } from './visit-name';

const ownPaths = ['number', 'label', 'kind', 'minutes', 'setupMinutes', 'cleanupMinutes'];
const gapPaths = ['minHours', 'targetHours', 'maxHours', 'nightsBetween'];

/** One line a visit, and one for each arm with a list of its own. */
export function describeVisits(content: ProtocolContent, reader: Reader): ProtocolLine[] {
	return content.visits.flatMap((visit, index) => {
		const place = `visits.${index + 1}`;
		return [
			describeVisit(visit, place, reader),
			...(reader.withRule ? describeArmLists(content, visit, place) : [])
		];
	});
}

function describeVisit(visit: VisitPlan, place: string, reader: Reader): ProtocolLine {
	const { kind, minutes, setupMinutes, cleanupMinutes, gapBefore, blocks } = visit;
	return {
		key: `visit-${visit.number}`,
		term: visit.label,
		text: [
			kind,
			`${describeBlocks(blocks, reader)} (${countTrials(visit)} trials)`,
			`${minutes} min with ${setupMinutes} min set-up and ${cleanupMinutes} min clean-up`,
			describeGap(gapBefore)
		]
			.filter(Boolean)
			.join('; '),
		tells: [
			...pathsIn(place, ownPaths),
			...(gapBefore ? pathsIn(`${place}.gapBefore`, gapPaths) : [`${place}.gapBefore`]),
			...listBlockPaths(`${place}.blocks`, blocks, reader)
		]
	};
}

function describeArmLists(
	{ arms }: ProtocolContent,
	visit: VisitPlan,
	place: string
): ProtocolLine[] {
	const reader = { withRule: true };
	return Object.entries(visit.armBlocks ?? {}).map(([key, blocks]: [string, BlockPlan[]]) => ({
		key: `visit-${visit.number}-arm-${key}`,
		term: `${visit.label}, ${arms.find((arm) => arm.key === key)?.name ?? key}`,
		text: `${describeBlocks(blocks, reader)} (${countTrials({ blocks })} trials)`,
		tells: listBlockPaths(`${place}.armBlocks.${key}`, blocks, reader)
	}));
}

/** '24 h (20 to 28), 1 night between'; empty for the first visit. */
export function describeGap(gap: VisitPlan['gapBefore']): string {
	if (!gap) return '';
	const nights = gap.nightsBetween === 1 ? '1 night' : `${gap.nightsBetween} nights`;
	return `${gap.targetHours} h after the one before (${gap.minHours} to ${gap.maxHours}), at least ${nights} between`;
}
