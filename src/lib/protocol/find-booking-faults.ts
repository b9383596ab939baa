import { readClockText } from './clock-text';
import { checkNumber, type Fault } from './fault';
import type { ProtocolDraft } from './protocol-draft';

/** What is wrong with clock times, weekdays and pauses. */
export function findBookingFaults({
	earliest,
	latest,
	weekdays,
	pauses,
	...booking
}: ProtocolDraft['booking']): Fault[] {
	const place = 'Booking';
	const say = (code: string, field: string, text: string, remedy: string): Fault => ({
		code,
		level: 'fault',
		place,
		field: `booking.${field}`,
		text,
		remedy
	});
	const [from, to] = [readClockText(earliest), readClockText(latest)];
	const faults = [
		...checkNumber({
			value: booking.sameTimeToleranceMinutes,
			place,
			field: 'booking.sameTimeToleranceMinutes',
			name: 'Allowed difference in clock time',
			unit: 'min',
			min: 0,
			max: 720,
			isWhole: true
		}),
		...checkNumber({
			value: pauses.count,
			place,
			field: 'booking.pauses.count',
			name: 'Number of pauses',
			min: 0,
			max: 10,
			isWhole: true
		})
	];
	if (from === null)
		faults.push(
			say('clock-missing', 'earliest', 'The earliest start is no clock time.', 'Write it as 08:00.')
		);
	if (to === null)
		faults.push(
			say('clock-missing', 'latest', 'The latest start is no clock time.', 'Write it as 18:00.')
		);
	if (from !== null && to !== null && from >= to)
		faults.push(
			say(
				'clock-order',
				'latest',
				`Visits may start from ${earliest} to ${latest}.`,
				'Let the latest start lie after the earliest.'
			)
		);
	if (weekdays.length === 0)
		faults.push(say('no-weekday', 'weekdays', 'No weekday is allowed.', 'Allow at least one.'));
	if ((pauses.count ?? 0) > 0) {
		const hours = (field: 'minHours' | 'maxHours', name: string) =>
			checkNumber({
				value: pauses[field],
				place,
				field: `booking.pauses.${field}`,
				name,
				unit: 'h',
				min: 1,
				max: 8760
			});
		faults.push(...hours('minHours', 'Shortest pause'), ...hours('maxHours', 'Longest pause'));
		if ((pauses.minHours ?? 0) > (pauses.maxHours ?? 0))
			faults.push(
				say(
					'pause-order',
					'pauses.minHours',
					'The shortest pause is longer than the longest.',
					'Swap them.'
				)
			);
	}
	return faults;
}
