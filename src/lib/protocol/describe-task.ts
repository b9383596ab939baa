import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import type { ProtocolLine } from './describe-protocol';

/** The task in plain words, with every number and its unit. */
export function describeTask(task: unknown): ProtocolLine[] {
	const record = taskRecordSchema.parse(task);
	return [
		{ key: 'model', term: 'Model', text: describeModel(record) },
		{
			key: 'tolerance',
			term: 'Hit',
			text: `a miss of at most ${record.tolerance} ${record.resultUnit}`.trim()
		},
		...record.variables.map(({ name, unit, min, max, origin, scale, resolution }) => ({
			key: `variable-${name}`,
			term: name,
			text: `${min} to ${max} ${unit}, origin ${origin}, scale ${scale} (one SD of a practised person), resolution ${resolution === 0 ? 'not known' : resolution}`
		}))
	];
}

function describeModel(record: TaskRecord): string {
	switch (record.type) {
		case 'puck':
			return `sliding puck: friction ${record.mu}, gravity ${record.g} m/s², target at ${record.D} m`;
		case 'projectile':
			return `throw from ${record.h} m at a target ${record.D} m away, ${record.H} m high, gravity ${record.g} m/s²`;
		case 'linear':
			return `weighted sum (${record.coef.join(', ')}) less ${record.target}`;
		case 'formula':
			return `error = ${record.formula}`;
	}
}
