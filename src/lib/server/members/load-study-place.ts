import { eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { lab, study } from '$lib/server/db/schema';

export type StudyPlace = { labId: string; labName: string; zone: string; workingTitle: string };

/** The lab a study belongs to, its zone, and the study's working title. */
export async function loadStudyPlace(
	db: Queryable,
	grant: Grant<'team:read'>
): Promise<StudyPlace> {
	const [row] = await db
		.select({
			labId: lab.id,
			labName: lab.name,
			zone: lab.zone,
			workingTitle: study.workingTitle
		})
		.from(study)
		.innerJoin(lab, eq(lab.id, study.labId))
		.where(eq(study.id, grant.studyId));
	if (!row) throw new Error('the study of a grant exists');
	return row;
}
