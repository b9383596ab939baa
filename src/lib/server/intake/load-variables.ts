import { taskRecordSchema } from '$scheduler/tasks/task-record';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { loadRunningVersion } from '$lib/server/studies/load-gates';

/** The execution variables that a study's trial files must hold; empty before a version runs. */
export async function loadVariables(
	db: Queryable,
	clock: Clock,
	studyId: string
): Promise<{ name: string; unit: string }[]> {
	const running = await loadRunningVersion(db, clock, studyId);
	if (!running) return [];
	return taskRecordSchema
		.parse(running.content.task)
		.variables.map(({ name, unit }) => ({ name, unit }));
}
