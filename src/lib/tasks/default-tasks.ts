import {
	taskRecordSchema,
	type TaskRecord,
	type TaskRecordInput,
	type TaskType
} from '$scheduler/tasks/task-record';
import { variable } from '$scheduler/tasks/task-variable';

/**
 * What a new task of each model starts from. Where nothing is said here, the record's own defaults hold:
 * product defaults of method sheets A1 to A8 (tethered ball: own choice, rounded; arm lengths of A6;
 * ranges of A2 to A5).
 */
const starts: Readonly<Record<Exclude<TaskType, 'formula'>, TaskRecordInput>> = {
	// Method sheet A4; speed and place of release with the scales of the worked patterns.
	puck: {
		...{ type: 'puck', mu: 0.18, g: 9.81, D: 2, tolerance: 0.12 },
		variables: [
			{ ...variable('release_speed', 'm/s', [0.5, 4], [2.486, 0.09]), resolution: 0.002 },
			{ ...variable('release_position', 'm', [-0.4, 1.1], [0.25, 0.07]), resolution: 0.001 }
		]
	},
	// Method sheet A3; place and tolerance of the case policy-placement-projectile.
	projectile: {
		...{ type: 'projectile', h: 1.6, D: 5, H: 1.2, g: 9.81, tolerance: 0.25 },
		variables: [
			variable('v_m_s', 'm/s', [3, 12], [6.8, 0.25]),
			variable('theta_deg', 'deg', [5, 75], [35, 3])
		]
	},
	// Method sheet A5 with a third finger: 2 to 20 N a finger, SD 0.2 to 1 N.
	linear: {
		...{ type: 'linear', coef: [1, 1, 1], target: 15, tolerance: 1.5, resultUnit: 'N' },
		variables: ['F1_N', 'F2_N', 'F3_N'].map((name) => variable(name, 'N', [0, 20], [5, 0.5]))
	},
	'tethered-ball': { type: 'tethered-ball' },
	'paddle-bounce': { type: 'paddle-bounce' },
	'throw-height': { type: 'throw-height' },
	'throw-azimuth': { type: 'throw-azimuth' },
	'puck-push': { type: 'puck-push' },
	'puck-friction': { type: 'puck-friction' },
	'two-finger': { type: 'two-finger' },
	'arm-endpoint': { type: 'arm-endpoint' },
	'arm-x': { type: 'arm-x' },
	'cart-pendulum': { type: 'cart-pendulum' }
};

/** The task that a new one of this model starts from. */
export function getDefaultTask(type: Exclude<TaskType, 'formula'>): TaskRecord {
	return taskRecordSchema.parse(starts[type]);
}

/**
 * A formula to start from or to look at: extent and direction of a reach on a table, of which only the way
 * forward counts. Own choice, invented scales.
 */
export const exampleFormula: TaskRecord = taskRecordSchema.parse({
	...{ type: 'formula', formula: 'extent * cos(direction * pi / 180) - 20', tolerance: 1 },
	resultUnit: 'cm',
	variables: [
		variable('extent', 'cm', [5, 45], [22, 1.2]),
		variable('direction', 'deg', [-75, 75], [25, 4])
	]
});
