import { readClockText } from './clock-text';
import { checkNumber, type Fault } from './fault';
import { findDayChain, type ChainGap, type ChainRules } from './find-day-chain';
import { findBookingFaults } from './find-booking-faults';
import { visitName } from './visit-name';
import type { GapDraft } from './draft-parts';
import type { ProtocolDraft } from './protocol-draft';

/** What is wrong with the hours between visits and with the rules of booking. */
export function findGapFaults(draft: ProtocolDraft): Fault[] {
	const faults = [
		...findBookingFaults(draft.booking),
		...draft.visits.flatMap((visit, index) =>
			index === 0 ? [] : findHourFaults(visit.gapBefore, index, visitName(visit, index))
		),
		...findRetentionFaults(draft)
	];
	return faults.some(({ level }) => level === 'fault')
		? faults
		: [...faults, ...findChainFaults(draft)];
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

function findRetentionFaults({ visits }: ProtocolDraft): Fault[] {
	return visits.flatMap((visit, index): Fault[] => {
		const { minHours } = visit.gapBefore;
		if (index === 0 || visit.kind !== 'retention' || minHours === null || minHours >= 24) return [];
		return [
			{
				code: 'retention-too-soon',
				level: 'fault',
				place: visitName(visit, index),
				field: `visits.${index}.gapBefore.minHours`,
				text: `Retention may follow after ${minHours} h: it would test performance after rest, not retention.`,
				remedy: 'Let at least 24 h pass.'
			}
		];
	});
}

/** Whether some week lets the whole chain be booked; asked only when every number is there. */
function findChainFaults(draft: ProtocolDraft): Fault[] {
	const { booking, visits } = draft;
	const [from, to] = [readClockText(booking.earliest) ?? 0, readClockText(booking.latest) ?? 1440];
	const windowHours = (to - from) / 60;
	const toleranceHours = (2 * (booking.sameTimeToleranceMinutes ?? 0)) / 60;
	const gaps = visits.slice(1).map(({ gapBefore }, index): ChainGap => ({
		minHours: gapBefore.minHours ?? 0,
		maxHours: gapBefore.maxHours ?? 0,
		nightsBetween: gapBefore.nightsBetween ?? 0,
		clockSpreadHours: index === 0 ? windowHours : Math.min(windowHours, toleranceHours)
	}));
	const { count, minHours, maxHours } = booking.pauses;
	const rules: ChainRules = {
		weekdays: booking.weekdays,
		pauses: { count: count ?? 0, minHours: minHours ?? 0, maxHours: maxHours ?? 0 }
	};
	const verdict = findDayChain(gaps, rules);
	if (verdict.ok) return [];
	const index = verdict.gapIndex + 1;
	const visit = visits[index];
	const [text, remedy] =
		verdict.reason === 'hours'
			? [
					'No number of days fits these hours and nights together.',
					'Change the hours, the nights or the clock times.'
				]
			: [
					'No week lets every visit up to here keep its gap on the allowed weekdays.',
					'Allow another weekday, one more pause, or a longer gap.'
				];
	return [
		{
			code: `chain-impossible-${verdict.reason}`,
			level: 'fault',
			place: visit ? visitName(visit, index) : 'Visits',
			field: `visits.${index}.gapBefore.maxHours`,
			text,
			remedy
		}
	];
}
