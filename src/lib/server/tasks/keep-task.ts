import { and, desc, eq, sql } from 'drizzle-orm';
import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import { readTaskDraft, type TaskDraft } from '$lib/tasks/task-draft';
import type { TaskFault } from '$lib/tasks/find-task-faults';
import { listTaskDifferences } from '$lib/tasks/list-task-differences';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { task } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';

export type KeepTaskInput = {
	name: string;
	note: string;
	draft: TaskDraft;
	/** Version that the draft came from; null for a task of a new name. */
	basedOn: number | null;
};

export type KeepTaskAnswer =
	| { ok: true; id: string; version: number }
	| { ok: false; reason: 'unreadable'; faults: readonly TaskFault[] }
	/** A task of this name exists already. */
	| { ok: false; reason: 'name-taken' }
	/** Somebody kept a newer version meanwhile. */
	| { ok: false; reason: 'stale'; newest: number }
	| { ok: false; reason: 'no-such-task' }
	| { ok: false; reason: 'nothing-changed' };

/** Keeps a task for the lab: a new name begins with version 1, a known one gets the next version. */
export async function keepTask(
	db: Database,
	clock: Clock,
	grant: Grant<'lab-task:keep'>,
	input: KeepTaskInput
): Promise<KeepTaskAnswer> {
	const reading = readTaskDraft(input.draft);
	if (!reading.ok) return { ok: false, reason: 'unreadable', faults: reading.faults };
	const { record } = reading;
	return db.transaction(async (tx): Promise<KeepTaskAnswer> => {
		// Two people who keep the same name at once come one after the other.
		await tx.execute(
			sql`select pg_advisory_xact_lock(hashtext(${`task:${grant.labId}:${input.name}`}))`
		);
		const newest = await findNewest(tx, grant, input.name);
		const refusal = findRefusal(input, newest, record);
		if (refusal) return refusal;
		const version = (newest?.version ?? 0) + 1;
		const [row] = await tx
			.insert(task)
			.values({
				...{ labId: grant.labId, name: input.name, version, record, note: input.note },
				...{ createdBy: grant.personId, createdAt: new Date(clock.now()) }
			})
			.returning({ id: task.id });
		if (!row) throw new Error('an inserted task has an id');
		await recordEvent(tx, clock, actorOf(grant), {
			...{ kind: 'task-kept', item: 'record', labId: grant.labId },
			body: { taskId: row.id, name: input.name, version, model: record.type }
		});
		return { ok: true, id: row.id, version };
	});
}

function findRefusal(
	{ basedOn }: KeepTaskInput,
	newest: { version: number; record: TaskRecord } | null,
	record: TaskRecord
): Exclude<KeepTaskAnswer, { ok: true }> | null {
	if (basedOn === null) return newest ? { ok: false, reason: 'name-taken' } : null;
	if (!newest) return { ok: false, reason: 'no-such-task' };
	if (newest.version !== basedOn) return { ok: false, reason: 'stale', newest: newest.version };
	const isSame = listTaskDifferences(newest.record, record).length === 0;
	return isSame ? { ok: false, reason: 'nothing-changed' } : null;
}

async function findNewest(
	tx: Queryable,
	{ labId }: Pick<Grant, 'labId'>,
	name: string
): Promise<{ version: number; record: TaskRecord } | null> {
	const [row] = await tx
		.select({ version: task.version, record: task.record })
		.from(task)
		.where(and(eq(task.labId, labId), eq(task.name, name)))
		.orderBy(desc(task.version))
		.limit(1);
	return row ? { version: row.version, record: taskRecordSchema.parse(row.record) } : null;
}
