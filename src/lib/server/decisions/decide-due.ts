import { sql } from 'drizzle-orm';
import type { Database } from '$lib/server/db/client';
import { alignReadyHours, decideForPerson, type DecideServices } from './decide-for-person';

/** Decides for everybody whose visit's ready hour has come, and moves ready hours with moved visits. */
export async function decideDue(db: Database, services: DecideServices): Promise<void> {
	for (const participantId of await findMovedVisits(db)) await alignReadyHours(db, participantId);
	for (const participantId of await findUndecided(db, services.clock.now())) {
		await decideForPerson(db, services, participantId);
	}
}

const firstBlock = sql`(select min((b->>'number')::int) from jsonb_array_elements(v.content->'visits') as t(visit), jsonb_array_elements(t.visit->'blocks') as u(b) where (t.visit->>'number')::int = k.visit_number)`;
const readyAt = sql`lower(k.during) - make_interval(secs => (v.content->>'readyLeadHours')::float8 * 3600)`;

async function findUndecided(db: Database, nowMs: number): Promise<string[]> {
	const rows = await db.execute<{ participant_id: string }>(sql`
		select k.participant_id
		from booking k
		join participant p on p.id = k.participant_id and p.state <> 'withdrawn'
		join protocol_version v on v.id = p.protocol_version_id
		where k.state in ('booked', 'attended')
			and upper(k.during) > ${new Date(nowMs - 86_400_000).toISOString()}
			and ${readyAt} <= ${new Date(nowMs).toISOString()}
			and (p.allocated_at is not null or k.visit_number = 1)
			and not exists (
				select 1 from decision d
				where d.participant_id = k.participant_id and d.visit_number = k.visit_number
					and d.block_number = ${firstBlock})
		group by k.participant_id, p.number order by p.number`);
	return rows.map((row) => row.participant_id);
}

async function findMovedVisits(db: Database): Promise<string[]> {
	const rows = await db.execute<{ participant_id: string }>(sql`
		select k.participant_id
		from booking k
		join participant p on p.id = k.participant_id
		join protocol_version v on v.id = p.protocol_version_id
		join decision d on d.participant_id = k.participant_id and d.visit_number = k.visit_number
			and d.block_number = ${firstBlock}
		where k.state = 'booked'
			and d.ready_at is distinct from date_trunc('milliseconds', ${readyAt})
			and not exists (
				select 1 from block b
				where b.participant_id = k.participant_id and b.visit_number = k.visit_number)
		group by k.participant_id, p.number order by p.number`);
	return rows.map((row) => row.participant_id);
}
