import { DrizzleQueryError } from 'drizzle-orm/errors';
import { formatDayTime, formatTime } from '$lib/time/format-instant';
import type { NamedCalendar } from './load-lab-calendar';

/** What the database refused to book twice. */
export type Clash = {
	what: 'rig' | 'room' | 'staff' | 'person' | 'visit';
	/** One sentence: what is taken, and when. */
	sentence: string;
};

const constraints: Record<string, Clash['what']> = {
	booking_no_rig_clash: 'rig',
	booking_no_room_clash: 'room',
	booking_no_staff_clash: 'staff',
	booking_no_person_clash: 'person',
	booking_visit_once: 'visit'
};

type DatabaseFault = { code: string; constraint_name?: string; detail?: string };

/**
 * Reads the refusal of a booking constraint, which comes with the statement or only at commit; null
 * for any other fault.
 */
export function explainClash(error: unknown, lab: NamedCalendar, code: string): Clash | null {
	const fault = readFault(error);
	const what = constraints[fault?.constraint_name ?? ''];
	if (!fault || !what) return null;
	if (what === 'visit') {
		return { what, sentence: `${code} has this visit booked already; load the page again.` };
	}
	const { id, when } = readDetail(fault.detail ?? '', lab.calendar.zone);
	const name = what === 'person' ? code : nameOf(what, id, lab);
	return { what, sentence: `${name} is taken ${when}; somebody booked it a moment ago.` };
}

/** Whether PostgreSQL asks for the transaction to be tried again. */
export function isWorthRetrying(error: unknown): boolean {
	return ['40001', '40P01'].includes(readFault(error)?.code ?? '');
}

function readFault(error: unknown): DatabaseFault | null {
	const cause = error instanceof DrizzleQueryError ? error.cause : error;
	return cause instanceof Error && 'code' in cause ? (cause as unknown as DatabaseFault) : null;
}

function nameOf(what: Clash['what'], id: string, lab: NamedCalendar): string {
	const names = { rig: lab.rigs.find((rig) => rig.id === id)?.name, room: lab.roomNames.get(id) };
	const found = what === 'staff' ? lab.staffNames.get(id) : names[what as 'rig' | 'room'];
	return found ?? `This ${what}`;
}

/**
 * The other booking as PostgreSQL names it: 'Key (rig_id, occupied)=(id, ["from","to")) conflicts
 * with existing key (rig_id, occupied)=(id, ["from","to")).'
 */
function readDetail(detail: string, zone: string): { id: string; when: string } {
	const id = /=\(([0-9a-f-]{36}),/.exec(detail)?.[1] ?? '';
	const existing = detail.split('existing key')[1] ?? '';
	const [from = Number.NaN, to = Number.NaN] = [...existing.matchAll(/"([^"]+)"/g)].map(
		([, text = '']) => Date.parse(text.replace(' ', 'T').replace(/([+-]\d\d)$/, '$1:00'))
	);
	if (Number.isNaN(from) || Number.isNaN(to)) return { id, when: 'at that time' };
	return { id, when: `on ${formatDayTime(from, zone)} to ${formatTime(to, zone)}` };
}
