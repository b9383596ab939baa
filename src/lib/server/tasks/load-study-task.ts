import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import { readTask } from '$lib/protocol/read-task';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { loadDraftContent } from '$lib/server/protocols/draft-content';
import { findDraftRow, findFrozenVersions } from '$lib/server/protocols/find-versions';

/** The task of a study: of the version being written, for who writes it, else of the latest frozen one. */
export type StudyTask = {
	from: 'draft' | 'frozen';
	version: number;
	record: TaskRecord;
};

export async function loadStudyTask(
	db: Queryable,
	grant: Grant<'task:read'>
): Promise<{ task: StudyTask | null; hasUnreadableDraft: boolean }> {
	const draft = grant.roles.includes('investigator') ? await findDraftRow(db, grant.studyId) : null;
	const record = draft && readTask(loadDraftContent(draft.content).task);
	if (draft && record)
		return { task: { from: 'draft', version: draft.number, record }, hasUnreadableDraft: false };
	const [frozen] = await findFrozenVersions(db, grant.studyId);
	return {
		task: frozen
			? {
					...{ from: 'frozen', version: frozen.number },
					record: taskRecordSchema.parse(frozen.content.task)
				}
			: null,
		hasUnreadableDraft: draft !== null
	};
}
