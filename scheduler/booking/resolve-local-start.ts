import type { BrokenRule } from './broken-rule.ts';
import { toDayNumber } from './local-date.ts';
import type { LocalDate } from './types.ts';
import { getZoneClock } from './zone-clock.ts';

/**
 * A start typed as a local date and time. Where clocks change it is never guessed: a time that does
 * not exist is a broken rule, one that exists twice comes back as two instants to choose from.
 *
 * Shapes: date and minute of the lab's day in, instants (one or two, ascending) out.
 * Source: method sheet "Calendar" T6 and T7. Accuracy: exact; zone-clock.test.ts.
 * @throws RangeError when the date is malformed or the zone is unknown
 * @example // 28 March 2027, 02:30 in Berlin: { ok: false, broken: { rule: 'clock-change-gap', ... } }
 */
export function resolveLocalStart(options: {
	visitNumber: number;
	date: LocalDate;
	minute: number;
	zone: string;
}): { ok: true; instants: number[] } | { ok: false; broken: BrokenRule } {
	const { visitNumber, date, minute, zone } = options;
	const instants = getZoneClock(zone).findInstants({ dayNumber: toDayNumber(date), minute });
	if (instants.length > 0) return { ok: true, instants };
	return {
		ok: false,
		broken: { rule: 'clock-change-gap', visitNumber, startMs: null, date, minute }
	};
}
