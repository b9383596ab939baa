import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import type { ProtocolLine } from './protocol-line';

const variableSteps = ['name', 'unit', 'min', 'max', 'origin', 'scale', 'resolution'];

/** The task in plain words, with every number and its unit. */
export function describeTask(task: unknown): ProtocolLine[] {
	const parsed = taskRecordSchema.safeParse(task);
	// Told value by value, by the part that lists what has no words.
	if (!parsed.success) return [];
	const record = parsed.data;
	return [
		{ key: 'model', term: 'Model', text: describeModel(record), tells: listModelPaths(record) },
		{
			key: 'tolerance',
			term: 'Hit',
			text: `a miss of at most ${record.tolerance} ${record.resultUnit}`.trim(),
			tells: ['task.tolerance', 'task.resultUnit']
		},
		...record.variables.map(({ name, unit, min, max, origin, scale, resolution }, index) => ({
			key: `variable-${name}`,
			term: name,
			tells: variableSteps.map((step) => `task.variables.${index + 1}.${step}`),
			text: `${min} to ${max} ${unit}, origin ${origin}, scale ${scale} (one SD of a practised person), resolution ${resolution === 0 ? 'not known' : resolution}`
		}))
	];
}

/** The values of a task that its model's line tells of; what is not a single value has none. */
function listModelPaths(record: TaskRecord): string[] {
	const named = record.type === 'linear' ? record.coef.map((_, index) => `coef.${index + 1}`) : [];
	const single = Object.entries(record)
		.filter(([name]) => name === 'type' || !HAS_LINE_OF_ITS_OWN.has(name))
		.filter(([, value]) => value === null || typeof value !== 'object')
		.map(([name]) => name);
	return [...single, ...named].map((path) => `task.${path}`);
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
		default:
			return `${MODEL_NAMES[record.type]}: ${listParameters(record)}`;
	}
}

type OtherType = Exclude<TaskRecord['type'], 'puck' | 'projectile' | 'linear' | 'formula'>;

const MODEL_NAMES: Record<OtherType, string> = {
	'tethered-ball': 'ball on two springs, swung past a post',
	'paddle-bounce': 'ball bounced on a paddle',
	'throw-height': 'throw with speed, angle and height of release',
	'throw-azimuth': 'throw with speed, angle and direction to the side',
	'puck-push': 'pushed puck',
	'puck-friction': 'sliding puck on a chosen surface',
	'two-finger': 'two finger forces',
	'arm-endpoint': 'three joints of an arm, fingertip on a point',
	'arm-x': 'three joints of an arm, fingertip on a line',
	'cart-pendulum': 'cart with a pendulum, moved to and fro'
};

const HAS_LINE_OF_ITS_OWN = new Set(['type', 'tolerance', 'resultUnit', 'variables']);

function listParameters(record: TaskRecord): string {
	return Object.entries(record)
		.filter(([name]) => !HAS_LINE_OF_ITS_OWN.has(name))
		.map(([name, value]) => `${name} ${value === null ? 'none' : String(value)}`)
		.join(', ');
}
