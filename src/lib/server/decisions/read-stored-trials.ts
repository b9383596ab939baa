import { asc, eq } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { trial } from '$lib/server/db/schema';

/** Executions of one block in the order of trials, in the task's units; blanks as null. */
export async function readStoredTrials(
	db: Queryable,
	blockId: string
): Promise<(number | null)[][]> {
	const rows = await db
		.select({ execution: trial.execution })
		.from(trial)
		.where(eq(trial.blockId, blockId))
		.orderBy(asc(trial.number));
	return rows.map((row) => row.execution);
}
