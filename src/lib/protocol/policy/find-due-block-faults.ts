import { checkNumber, faultAt, type Fault } from '../fault';
import { hasAdaptiveTime } from '../has-adaptive-time';
import type { ProtocolDraft } from '../protocol-draft';
import { visitName } from '../visit-name';
import { readDueBlocks, type DueBlock } from './due-blocks';

/** What is wrong with blocks that are due: moments, visits, feedback, offset. */
export function findDueBlockFaults(draft: ProtocolDraft): Fault[] {
	if (!hasAdaptiveTime(draft)) return [];
	return readDueBlocks(draft).flatMap((row, index) => [
		...findWhenFaults(row, index),
		...findDayFaults(row, index, draft.visits),
		...findKindFaults(row, index)
	]);
}

const at = (index: number, field: string) => ({
	place: `Due block ${index + 1}`,
	field: `policy.obligations.${index}.${field}`
});

function findWhenFaults(row: DueBlock, index: number): Fault[] {
	if (row.at === 'day-start') {
		return checkNumber({
			...{ ...at(index, 'gapHoursMin'), value: row.gapHoursMin, name: 'Gap before it' },
			...{ unit: 'h', min: 0, max: 8760 }
		});
	}
	if (row.at !== 'every') return [];
	return checkNumber({
		...{ ...at(index, 'perturbedBlocks'), value: row.perturbedBlocks, name: 'Perturbed blocks' },
		...{ min: 1, max: 100, isWhole: true }
	});
}

function findDayFaults(
	{ at: moment, days }: DueBlock,
	index: number,
	visits: ProtocolDraft['visits']
): Fault[] {
	if (days === null || !moment.startsWith('day')) return [];
	const where = at(index, 'days');
	if (typeof days === 'string') {
		const text = `“${days}” is no list of visits.`;
		return [faultAt('days-unreadable', where, text, 'Write numbers of visits, such as 2 4 6.')];
	}
	const unfit = days.find((day) => !hasAdaptive(visits[day - 1]));
	if (unfit === undefined) return [];
	const visit = visits[unfit - 1];
	const text = visit
		? `${visitName(visit, unfit - 1)} (visit ${unfit}) has no adaptive time.`
		: `There is no visit ${unfit}.`;
	return [faultAt('days-without-time', where, text, 'Name visits with adaptive time, or none.')];
}

function hasAdaptive(visit: ProtocolDraft['visits'][number] | undefined): boolean {
	return visit?.blocks.some(({ purpose }) => purpose === 'adaptive') ?? false;
}

function findKindFaults({ kind, feedback, targetOffset }: DueBlock, index: number): Fault[] {
	if (kind === 'clamp' && feedback !== null && !feedback.startsWith('clamped')) {
		const text = 'An error clamp whose result is not clamped.';
		return [
			faultAt('clamp-feedback', at(index, 'feedback'), text, 'Let the result shown be clamped.')
		];
	}
	if (kind !== 'transfer' || (targetOffset !== null && targetOffset !== 0)) return [];
	const text = 'A transfer block at the usual target.';
	return [
		faultAt('transfer-offset', at(index, 'targetOffset'), text, 'Say where the other target lies.')
	];
}
