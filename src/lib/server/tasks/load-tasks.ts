import { and, asc, desc, eq } from 'drizzle-orm';
import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { person, task } from '$lib/server/db/schema';

export type TaskVersion = {
	id: string;
	name: string;
	version: number;
	record: TaskRecord;
	note: string;
	keptBy: string;
	keptAtMs: number;
};

type LabGrant = Pick<Grant<'lab:read' | 'lab-task:keep' | 'task:read'>, 'labId'>;

/** Every version of every task of the lab: tasks by name, the newest version of each first. */
export async function loadTasks(db: Queryable, grant: LabGrant): Promise<TaskVersion[]> {
	const rows = await selectVersions(db)
		.where(eq(task.labId, grant.labId))
		.orderBy(asc(task.name), desc(task.version));
	return rows.map(toVersion);
}

/** One version of a task of the lab; null where there is none of that id. */
export async function loadTask(
	db: Queryable,
	grant: LabGrant,
	id: string
): Promise<TaskVersion | null> {
	const [row] = await selectVersions(db).where(and(eq(task.labId, grant.labId), eq(task.id, id)));
	return row ? toVersion(row) : null;
}

function selectVersions(db: Queryable) {
	return db
		.select({ task, personName: person.name, personEmail: person.email })
		.from(task)
		.innerJoin(person, eq(person.id, task.createdBy));
}

type Row = Awaited<ReturnType<typeof selectVersions>>[number];

function toVersion({ task: row, personName, personEmail }: Row): TaskVersion {
	return {
		...{ id: row.id, name: row.name, version: row.version, note: row.note },
		record: taskRecordSchema.parse(row.record),
		keptBy: personName ?? personEmail,
		keptAtMs: row.createdAt.getTime()
	};
}
