import type { TaskType } from '$scheduler/tasks/task-record';

/** A number of a task model that is the same in every trial. */
export interface NumberField {
	/** Under this name in a draft: "targetX". */
	readonly key: string;
	/** Where it stands in the record: ['target', 0]. */
	readonly path: readonly (string | number)[];
	readonly label: string;
	readonly unit: string;
	/** What may be typed: wider than any study needs, narrow enough to catch a slip of the unit. */
	readonly min: number;
	readonly max: number;
	/** What an empty field means; without it a number has to be there. */
	readonly emptyMeans?: string;
}

/** A constant with a closed set of values. */
export interface ChoiceField {
	readonly key: string;
	readonly label: string;
	readonly options: readonly { readonly value: string; readonly label: string }[];
}

/** What people need to know of a task model to fill in its form. */
export interface TaskModel {
	readonly label: string;
	/** What is done in a trial, in one sentence. */
	readonly detail: string;
	/** The result in words and signs. */
	readonly result: string;
	readonly numbers: readonly NumberField[];
	readonly choices: readonly ChoiceField[];
	/** Fewest and most variables; equal where the model has its own. */
	readonly variableCount: readonly [number, number];
	/** Whether the units of variables and result are for the lab to say. */
	readonly hasOwnUnits: boolean;
}

const number = (
	key: string,
	label: string,
	unit: string,
	[min, max]: readonly [number, number],
	more: Partial<Pick<NumberField, 'path' | 'emptyMeans'>> = {}
): NumberField => ({ key, path: [key], label, unit, min, max, ...more });

const gravity = number('g', 'Gravity', 'm/s²', [0.1, 30]);
const friction = number('mu', 'Friction μ', '', [0.01, 2]);
const targetDistance = number('D', 'Target distance', 'm', [0.05, 50]);
const targetHeight = number('H', 'Target height', 'm', [-10, 20]);
const releaseHeight = number('h', 'Release height', 'm', [0, 10]);

const lengths = ['Upper arm', 'Forearm', 'Hand'].map((label, index) =>
	number(`length${index + 1}`, label, 'm', [0.01, 2], { path: ['lengths', index] })
);
const point = (key: string, label: string, reach: number) =>
	(['x', 'y'] as const).map((axis, index) =>
		number(`${key}${axis.toUpperCase()}`, `${label}, ${axis}`, 'm', [-reach, reach], {
			path: [key, index]
		})
	);

const given = { choices: [], hasOwnUnits: false } as const;

/** Every task model, in the order in which a form offers them. */
export const taskModels: Readonly<Record<TaskType, TaskModel>> = {
	puck: {
		...given,
		label: 'Sliding puck',
		detail: 'Released with a speed at a position, it slides until friction stops it.',
		result: 'release position + speed² / (2·μ·g) − target distance',
		numbers: [friction, targetDistance, gravity],
		variableCount: [2, 2]
	},
	'puck-push': {
		...given,
		label: 'Pushed puck',
		detail: 'Pushed with a steady force over a way, then left to slide.',
		result: 'force · way / (μ·m·g) − target distance',
		numbers: [friction, number('m', 'Mass', 'kg', [0.001, 50]), targetDistance, gravity],
		variableCount: [2, 2]
	},
	'puck-friction': {
		...given,
		label: 'Puck on a chosen surface',
		detail: 'The person chooses the speed and the surface on which the puck slides.',
		result: 'release position + speed² / (2·friction·g) − target distance',
		numbers: [number('x0', 'Release position', 'm', [-10, 10]), targetDistance, gravity],
		variableCount: [2, 2]
	},
	projectile: {
		...given,
		label: 'Throw at a target',
		detail: 'A ball is thrown at a target plane with a speed at an angle; no drag.',
		result: 'height in the target plane − target height',
		numbers: [releaseHeight, targetDistance, targetHeight, gravity],
		variableCount: [2, 2]
	},
	'throw-height': {
		...given,
		label: 'Throw with height of release',
		detail: 'Speed, angle and height of release decide where the ball comes down.',
		result: 'height in the target plane − target height',
		numbers: [targetDistance, targetHeight, gravity],
		variableCount: [3, 3]
	},
	'throw-azimuth': {
		...given,
		label: 'Throw with direction to the side',
		detail: 'Speed, elevation and direction; the ball has to pass one point of a plane.',
		result: 'miss to the side and miss in height, two results',
		numbers: [
			releaseHeight,
			targetDistance,
			targetHeight,
			number('side', 'Target to the side', 'm', [-20, 20]),
			gravity
		],
		variableCount: [3, 3]
	},
	'tethered-ball': {
		...given,
		label: 'Tethered-ball throw',
		detail: 'A ball on two springs swings round a post and should pass through the target.',
		result: 'distance at the closest pass, plus on the left of the way',
		numbers: [
			...point('target', 'Target', 10),
			number('k', 'Stiffness of each spring', 'N/m', [0.01, 1000]),
			number('m', 'Mass of the ball', 'kg', [0.001, 10]),
			number('relaxationTime', 'Relaxation time', 's', [0.05, 1e4], {
				emptyMeans: 'the swing does not die down'
			}),
			number('arm', 'Arm', 'm', [0.02, 2]),
			...point('pivot', 'Arm turns at', 10),
			number('postRadius', 'Radius of the post', 'm', [0, 2]),
			number('ballRadius', 'Radius of the ball', 'm', [0, 1]),
			number('postPenalty', 'A ball on the post counts as', 'm', [1e-6, 100]),
			number('window', 'Time looked at', 's', [0.05, 60], { emptyMeans: 'one turn' })
		],
		choices: [
			{
				key: 'postHit',
				label: 'A ball that meets the post',
				options: [
					{ value: 'penalty', label: 'counts as a fixed miss' },
					{ value: 'truncate', label: 'is judged by its way up to the post' }
				]
			}
		],
		variableCount: [2, 2]
	},
	'paddle-bounce': {
		...given,
		label: 'Ball bounced on a paddle',
		detail: 'Speed of the ball and of the paddle where they meet decide how high it rises.',
		result: 'height of the next apex − target height',
		numbers: [
			number('restitution', 'Restitution ε', '', [0.01, 0.99]),
			number('targetHeight', 'Target height', 'm', [-5, 10]),
			number('impactHeight', 'Height of the meeting', 'm', [-5, 10]),
			gravity
		],
		variableCount: [2, 3]
	},
	'two-finger': {
		...given,
		label: 'Two-finger force',
		detail: 'Two fingers press together; the sum of their forces counts.',
		result: 'force 1 + force 2 − target force',
		numbers: [number('target', 'Target force', 'N', [0.1, 500])],
		variableCount: [2, 2]
	},
	'arm-endpoint': {
		...given,
		label: 'Three-joint reach to a point',
		detail: 'Shoulder, elbow and wrist bring the fingertip to a point of the plane.',
		result: 'miss along x and along y, two results',
		numbers: [...point('target', 'Target', 5), ...lengths],
		variableCount: [3, 3]
	},
	'arm-x': {
		...given,
		label: 'Three-joint reach to a line',
		detail: 'Shoulder, elbow and wrist bring the fingertip to a line across the plane.',
		result: 'x of the fingertip − x of the line',
		numbers: [number('targetX', 'Target line, x', 'm', [-5, 5]), ...lengths],
		variableCount: [3, 3]
	},
	'cart-pendulum': {
		...given,
		label: 'Cart with a pendulum',
		detail: 'A cart with a hanging pendulum is moved to and fro at a given pace.',
		result: 'measure of the transport − value asked for',
		numbers: [
			number('target', 'Value asked for', '', [-1e6, 1e6]),
			number('seconds', 'Time measured', 's', [0.1, 120]),
			number('frequency', 'Pace', 'Hz', [0.05, 10]),
			number('cartMass', 'Mass of the cart', 'kg', [0.01, 200]),
			number('bobMass', 'Mass of the pendulum', 'kg', [0.001, 100]),
			number('length', 'Length of the pendulum', 'm', [0.01, 5]),
			number('damping', 'Damping', '1/s', [0, 50]),
			gravity
		],
		choices: [
			{
				key: 'measure',
				label: 'Judged by',
				options: [
					{ value: 'effort', label: 'effort, mean square force' },
					{ value: 'smoothness', label: 'smoothness, mean square jerk' },
					{ value: 'predictability', label: 'predictability of the force' }
				]
			}
		],
		variableCount: [2, 2]
	},
	linear: {
		label: 'Weighted sum',
		detail: 'A weighted sum of up to twelve variables should come to a value.',
		result: 'weight · variable, summed, − value asked for',
		numbers: [number('target', 'Value asked for', '', [-1e9, 1e9])],
		choices: [],
		variableCount: [1, 12],
		hasOwnUnits: true
	},
	formula: {
		label: 'A formula of your own',
		detail: 'The signed error of a trial from variables that you name.',
		result: 'the value of the formula; 0 is a perfect trial',
		numbers: [],
		choices: [],
		variableCount: [1, 12],
		hasOwnUnits: true
	}
};

/** Units of the cart's measures, which follow from the measure chosen. */
export const cartUnits: Readonly<Record<string, string>> = {
	effort: 'N²',
	smoothness: 'm²/s⁶',
	predictability: 'bit'
};

/** Whether a text names a task model. */
export function isTaskType(text: string): text is TaskType {
	return Object.hasOwn(taskModels, text);
}

export const taskTypes = Object.keys(taskModels).filter(isTaskType);
