import { createTask } from '$scheduler/tasks/create-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { readTaskDraft } from '../tasks/task-draft';
import type { Fault } from './fault';
import { findDegenerateFaults } from './find-degenerate-faults';
import { hasAdaptiveTime } from './has-adaptive-time';
import { hasZeroInside } from './has-zero-inside';
import type { ProtocolDraft } from './protocol-draft';

const field = 'task.type';

/** What keeps the task from being run, and what the engine cannot do with it yet. */
export function findTaskFaults(draft: ProtocolDraft): Fault[] {
	const reading = readTaskDraft(draft.task);
	if (!reading.ok) {
		return reading.faults.map((fault) => ({ ...fault, field: `task.${fault.field}` }));
	}
	const { record } = reading;
	return [
		...findMissingZero(record),
		...findDegenerateFaults(record, field),
		...(hasAdaptiveTime(draft) && draft.aims.region.isOn ? findUnplaceable(record) : [])
	];
}

/** A caution when no execution inside the ranges gives a perfect trial. */
function findMissingZero(record: TaskRecord): Fault[] {
	if (hasZeroInside(record) !== false) return [];
	return [
		{
			...{ code: 'no-zero-inside', level: 'caution', place: 'Task', field },
			text: 'No execution inside the ranges gives an error of 0: nobody can be perfect.',
			remedy: 'Widen the ranges or change the target.'
		}
	];
}

/** Regions are placed where one or two directions are free; the rest becomes plain practice. */
function findUnplaceable(record: TaskRecord): Fault[] {
	const { variableCount, resultCount } = createTask(record);
	const free = variableCount - resultCount;
	if (free === 1 || free === 2) return [];
	const text =
		free <= 0
			? 'With as many results as variables there is only one way to be right, so there is nowhere to drive people to.'
			: `With ${variableCount} variables the ways to be right run in ${free} directions; regions can be placed for one or two, so none is placed here.`;
	return [
		{
			...{ code: 'region-unplaceable', level: 'caution', place: 'Aims, penalized regions' },
			...{ field: 'aims.region.isOn', text },
			remedy:
				'Take the aim off, or know that those blocks become plain practice, with the reason said.'
		}
	];
}
