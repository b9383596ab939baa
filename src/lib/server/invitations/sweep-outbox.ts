import { sql } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';

/**
 * Takes out of the queue what must not be sent any more. A mail that a process may have sent before
 * it died (its lease ran out) becomes `unknown` instead.
 *
 * - overtaken: a request with a newer mail about its visit, for a visit not booked any more, or to
 *   somebody who has withdrawn;
 * - too late: a request for a visit that has begun;
 * - hopeless: anything to an address that a mail server refused and nobody has mended since;
 * - needless: a cancellation of a visit of which no mail can have arrived.
 */
export async function sweepOutbox(db: Queryable, nowMs: number): Promise<void> {
	const now = new Date(nowMs).toISOString();
	const isWaitingRequest = sql`o.state = 'waiting' and o.kind in ('invitation', 'moved')
		and (o.lease_until is null or o.lease_until < ${now}::timestamptz)`;
	await db.execute(sql`
		update outbox as o
		set state = case when o.lease_until is null then 'superseded' else 'unknown' end, lease_until = null
		where ${isWaitingRequest} and (
			exists (select 1 from outbox as newer where newer.booking_id = o.booking_id
				and newer.sequence > o.sequence and newer.state <> 'superseded')
			or exists (select 1 from booking as b where b.id = o.booking_id and b.state <> 'booked')
			or exists (select 1 from participant as p where p.id = o.participant_id and p.state = 'withdrawn'))`);
	await db.execute(sql`
		update outbox as o
		set state = case when o.lease_until is null then 'failed' else 'unknown' end,
			last_error = 'too-late', lease_until = null
		where ${isWaitingRequest} and exists (
			select 1 from booking as b where b.id = o.booking_id and lower(b.during) <= ${now}::timestamptz)`);
	await db.execute(sql`
		update outbox as o
		set state = 'failed', last_error = 'address-refused'
		where o.state = 'waiting' and o.lease_until is null and exists (
			select 1 from outbox as refused join contact as c on c.participant_id = refused.participant_id
			where refused.participant_id = o.participant_id and refused.state = 'failed'
				and refused.last_error = 'address-refused' and refused.attempts > 0 and refused.due_at >= c.updated_at)`);
	await db.execute(sql`
		update outbox as o
		set state = 'superseded'
		where o.state = 'waiting' and o.lease_until is null and o.kind = 'cancelled' and not exists (
			select 1 from outbox as earlier where earlier.booking_id = o.booking_id and earlier.id <> o.id
				and (earlier.state in ('sent', 'unknown') or earlier.lease_until is not null))`);
}
