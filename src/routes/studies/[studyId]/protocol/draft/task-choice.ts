import type { TaskVersion } from '$lib/server/tasks/load-tasks';

/** A version of a task that the lab keeps, as the protocol's form offers it. */
export type TaskChoice = Pick<TaskVersion, 'id' | 'name' | 'version' | 'record'>;
