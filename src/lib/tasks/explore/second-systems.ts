import {
	createLinearSystem,
	createLogSystem,
	createSquareSystem,
	createVelocitySystem,
	type CoordinateSystem
} from '$scheduler/variability/coordinates';
import type { TaskRecord } from '$scheduler/tasks/task-record';

/** Another way to write the same trials. */
export interface SecondSystem {
	readonly key: string;
	/** In a list: "velocity, sideways and upward". */
	readonly label: string;
	/** In a sentence: "as velocities". */
	readonly phrase: string;
	readonly system: CoordinateSystem;
	/** Names and units of its coordinates, in the order of the variables. */
	readonly axes: readonly { readonly label: string; readonly unit: string }[];
}

const radPerUnit = Math.PI / 180;

/** The coordinate systems in which the trials of a task can be written as well, the most telling first. */
export function listSecondSystems(record: TaskRecord): SecondSystem[] {
	return [...listOwn(record), ...listGeneral(record)];
}

function listOwn(record: TaskRecord): SecondSystem[] {
	const axes = record.variables.map(({ name, unit }) => ({ label: name, unit }));
	switch (record.type) {
		case 'tethered-ball':
			return [
				velocity(axes, { angleAxis: 0, speedAxis: 1, turnRad: Math.PI / 2, across: 'sideways' })
			];
		case 'projectile':
		case 'throw-height':
		case 'throw-azimuth':
			return [velocity(axes, { angleAxis: 1, speedAxis: 0, turnRad: 0, across: 'forward' })];
		case 'puck':
		case 'puck-friction':
			return [
				{
					...{
						key: 'square',
						label: 'square of the speed',
						phrase: 'with the square of the speed'
					},
					system: createSquareSystem({ name: 'square', axis: 0, factor: 1 }),
					axes: axes.map((axis, i) => (i === 0 ? { label: 'speed²', unit: 'm²/s²' } : axis))
				}
			];
		case 'arm-endpoint':
		case 'arm-x': {
			const weights = axes.map((_, i) => axes.map((_other, j) => (j <= i ? 1 : 0)));
			return [
				{
					...{ key: 'limbs', label: 'angles of the limbs against the room' },
					...{
						phrase: 'as angles of the limbs',
						system: createLinearSystem({ name: 'limbs', weights })
					},
					axes: ['upper arm', 'forearm', 'hand'].map((label) => ({ label, unit: 'deg' }))
				}
			];
		}
		case 'paddle-bounce': {
			const weights = axes.map((_, i) =>
				axes.map((_other, j) => (i === 0 ? (j === 0 ? -1 : j === 1 ? 1 : 0) : i === j ? 1 : 0))
			);
			return [
				{
					...{
						key: 'closing',
						label: 'closing speed and paddle speed',
						phrase: 'with the closing speed'
					},
					system: createLinearSystem({ name: 'closing', weights }),
					axes: axes.map((axis, i) =>
						i === 0 ? { label: 'closing speed', unit: axis.unit } : axis
					)
				}
			];
		}
		default:
			return [];
	}
}

/** Logarithms where every range is positive; sum and difference where the first two share a unit. */
function listGeneral({ variables }: TaskRecord): SecondSystem[] {
	const found: SecondSystem[] = [];
	if (variables.every(({ min }) => min > 0))
		found.push({
			...{ key: 'log', label: 'logarithms', phrase: 'as logarithms', system: createLogSystem() },
			axes: variables.map(({ name }) => ({ label: `ln ${name}`, unit: '' }))
		});
	const [first, second, ...rest] = variables;
	if (!first || !second) return found;
	const isOneUnit = first.unit === second.unit;
	const [a, b] = isOneUnit ? [1, 1] : [1 / first.scale, 1 / second.scale];
	const weights = variables.map((_, i) =>
		variables.map((_other, j) => {
			if (i > 1 || j > 1) return i === j ? 1 : 0;
			return j === 0 ? a : i === 0 ? b : -b;
		})
	);
	const unit = isOneUnit ? first.unit : 'SD';
	found.push({
		...{ key: 'sum', phrase: 'as sum and difference' },
		label: isOneUnit ? 'sum and difference' : 'sum and difference, scaled',
		system: createLinearSystem({ name: 'sum', weights }),
		axes: [
			{ label: 'sum', unit },
			{ label: 'difference', unit },
			...rest.map(({ name, unit: own }) => ({ label: name, unit: own }))
		]
	});
	return found;
}

function velocity(
	axes: readonly { label: string; unit: string }[],
	{ across, ...place }: { angleAxis: number; speedAxis: number; turnRad: number; across: string }
): SecondSystem {
	const unit = axes[place.speedAxis]?.unit ?? 'm/s';
	return {
		key: 'velocity',
		label: `velocity, ${across} and upward`,
		phrase: 'as velocities',
		system: createVelocitySystem({ ...place, radPerUnit }),
		axes: axes.map((axis, i) => {
			if (i === place.angleAxis) return { label: `velocity ${across}`, unit };
			return i === place.speedAxis ? { label: 'velocity upward', unit } : axis;
		})
	};
}
