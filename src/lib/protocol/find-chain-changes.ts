import type { VisitPlan } from '$scheduler/protocol/visit-plan';
import { describeBlocks } from './describe-blocks';
import { describeGap } from './describe-visits';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';

/**
 * What keeps people who are in flight from following another version, in words: visits and arms are
 * the chain they are booked and allocated by. Empty when booked chains and arms hold in both.
 */
export function findChainChanges(before: ProtocolContent, after: ProtocolContent): string[] {
	return [...findVisitChanges(before, after), ...findArmChanges(before, after)];
}

function findVisitChanges(before: ProtocolContent, after: ProtocolContent): string[] {
	const [was, is] = [before.visits.length, after.visits.length];
	if (was !== is) return [`${is} visits in place of ${was}`];
	return before.visits.flatMap((visit, index) => {
		const now = after.visits[index];
		if (!now) return [];
		const [old, fresh] = [describeChain(visit), describeChain(now)];
		return old === fresh
			? []
			: [`${now.label}: ${fresh || 'no gap'} in place of ${old || 'no gap'}`];
	});
}

/** What a booking, a stored block or a hold of a gap rests on. */
function describeChain(visit: VisitPlan): string {
	const { number, kind, minutes, setupMinutes, cleanupMinutes, blocks, gapBefore } = visit;
	return [
		`${kind} ${number}, ${minutes} min with ${setupMinutes} and ${cleanupMinutes}`,
		describeBlocks(blocks),
		...Object.entries(visit.armBlocks ?? {}).map(([key, own]) => `${key}: ${describeBlocks(own)}`),
		describeGap(gapBefore)
	]
		.filter(Boolean)
		.join('; ');
}

function findArmChanges({ arms: before }: ProtocolContent, { arms: after }: ProtocolContent) {
	const name = ({ key, rule }: ProtocolContent['arms'][number]) => `${key} (${rule})`;
	const [was, is] = [before.map(name).sort(), after.map(name).sort()];
	return was.join() === is.join() ? [] : [`arms ${is.join(', ')} in place of ${was.join(', ')}`];
}
