import { formatShortDay, formatTime } from '$lib/time/format-instant';
import { localDateOf } from '$lib/time/wall-clock';
import type { WaitingItem } from '$lib/waiting/waiting-item';
import type { Grant } from '$lib/server/access/require-permission';
import { findWays, loadMovable } from '$lib/server/bookings/judge-visit';
import { noticeMs } from '$lib/server/bookings/propose-chains';
import { tellWay } from '$lib/server/bookings/tell-ways';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';

const wanted = new Set<WaitingItem['kind']>(['missed', 'declined', 'asks-other-time']);
/** Finding ways is a search; the most urgent few are worth it on a first page. */
const searchCount = 4;

/** Says for the most urgent missed and unwanted visits where they could go instead. */
export async function addWays(
	db: Queryable,
	clock: Clock,
	grant: Grant<'today:read'>,
	{ items, zone }: { items: readonly WaitingItem[]; zone: string }
): Promise<WaitingItem[]> {
	const searched = new Set(
		items
			.filter(({ kind }) => wanted.has(kind))
			.slice(0, searchCount)
			.map(({ key }) => key)
	);
	const found: WaitingItem[] = [];
	for (const item of items) {
		found.push(searched.has(item.key) ? await addWay(db, clock, grant, { item, zone }) : item);
	}
	return found;
}

async function addWay(
	db: Queryable,
	clock: Clock,
	grant: Grant<'today:read'>,
	{ item, zone }: { item: WaitingItem; zone: string }
): Promise<WaitingItem> {
	const { bookingId, act } = item;
	if (!bookingId || !act) return item;
	const movable = await loadMovable(db, clock, grant, { bookingId });
	if (!movable.ok) return item;
	const ways = findWays(movable, { nowMs: clock.now() + noticeMs });
	const [first] = ways;
	if (!first) {
		return { ...item, what: `${item.what} No place in twelve weeks keeps every rule.` };
	}
	const way = tellWay(movable, first);
	const when = nameMoment(way.startMs, clock.now(), zone);
	const place = `${when} on ${way.rigName}`;
	const more = ways.length > 1 ? `, and ${ways.length - 1} more` : '';
	const what = `${item.what} What keeps their chain: ${place}${more}.`;
	return { ...item, what, act: { ...act, label: `Offer ${place}` } };
}

/** 'today 12:30', 'tomorrow 12:15', 'Fri 12 Mar 12:15'. */
function nameMoment(ms: number, nowMs: number, zone: string): string {
	const [day, today] = [localDateOf(ms, zone), localDateOf(nowMs, zone)];
	const tomorrow = localDateOf(nowMs + 24 * 3_600_000, zone);
	const name = day === today ? 'today' : day === tomorrow ? 'tomorrow' : formatShortDay(ms, zone);
	return `${name} ${formatTime(ms, zone)}`;
}
