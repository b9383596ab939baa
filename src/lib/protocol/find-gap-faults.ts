import { checkNumber, type Fault } from './fault';
import { findBookingFaults } from './find-booking-faults';
import { visitName } from './visit-name';
import type { GapDraft } from './draft-parts';
import type { ProtocolDraft } from './protocol-draft';

/** What is wrong with the hours between visits and with the rules of booking. */
export function findGapFaults(draft: ProtocolDraft): Fault[] {
	return [
		...findBookingFaults(draft.booking),
		...draft.visits.flatMap((visit, index) =>
			index === 0 ? [] : findHourFaults(visit.gapBefore, index, visitName(visit, index))
		)
	];
}

function findHourFaults(gap: GapDraft, index: number, place: string): Fault[] {
	const field = (name: string) => `visits.${index}.gapBefore.${name}`;
	const hours = (name: 'minHours' | 'targetHours' | 'maxHours', label: string) =>
		checkNumber({
			value: gap[name],
			place,
			field: field(name),
			name: label,
			unit: 'h',
			min: 0,
			max: 8760
		});
	const faults = [
		...hours('minHours', 'Shortest gap'),
		...hours('targetHours', 'Wanted gap'),
		...hours('maxHours', 'Longest gap'),
		...checkNumber({
			value: gap.nightsBetween,
			place,
			field: field('nightsBetween'),
			name: 'Nights between',
			min: 0,
			max: 60,
			isWhole: true
		})
	];
	const { minHours, targetHours, maxHours } = gap;
	if (faults.length > 0 || minHours === null || targetHours === null || maxHours === null)
		return faults;
	if (minHours <= targetHours && targetHours <= maxHours) return [];
	return [
		{
			code: 'gap-order',
			level: 'fault',
			place,
			field: field('targetHours'),
			text: `Hours ${minHours}, ${targetHours}, ${maxHours}.`,
			remedy: 'Let them rise: shortest, wanted, longest.'
		}
	];
}
