import type { TaskRecord } from '$scheduler/tasks/task-record';
import { readTaskDraft, type TaskDraft } from '../tasks/task-draft';

/** The task as the engine takes it; null while something is missing or wrong. */
export function readTask(draft: TaskDraft): TaskRecord | null {
	const reading = readTaskDraft(draft);
	return reading.ok ? reading.record : null;
}
