import { eq } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { lab, study } from '$lib/server/db/schema';

/** The time zone of the study's lab. @throws {RangeError} no such study */
export async function loadStudyZone(db: Queryable, studyId: string): Promise<string> {
	const [row] = await db
		.select({ zone: lab.zone })
		.from(study)
		.innerJoin(lab, eq(lab.id, study.labId))
		.where(eq(study.id, studyId));
	if (!row) throw new RangeError('loadStudyZone requires a study that exists');
	return row.zone;
}
