import { computeNormalPoints } from '../statistics/r-sequence.ts';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { taskRecordSchema } from '../tasks/task-record.ts';

/** A sliding puck with round numbers, for tests. */
export const PUCK_RECORD = taskRecordSchema.parse({
	...{ type: 'puck', mu: 0.18, g: 9.81, D: 2, tolerance: 0.12 },
	variables: [
		{
			...{ name: 'release_speed', unit: 'm/s', min: 0.5, max: 4 },
			...{ origin: 2.486, scale: 0.09, resolution: 0.002 }
		},
		{
			...{ name: 'release_position', unit: 'm', min: -0.4, max: 1.1 },
			...{ origin: 0.25, scale: 0.07, resolution: 0.001 }
		}
	]
});

/**
 * Trials of an invented person whose cloud lies along the solutions of the puck, in task units;
 * evenly spread, so that no gate objects.
 */
export function spreadAlongManifold(count: number, sd = { along: 1, across: 0.35 }): number[][] {
	const task = createScaledTask(createTask(PUCK_RECORD));
	const [g1 = 0, g2 = 1] = task.gradient([0, 0]);
	const length = Math.hypot(g1, g2);
	const [t1, t2] = [-g2 / length, g1 / length];
	return computeNormalPoints(count, 2).map(([a = 0, b = 0]) =>
		task.toUnits([
			sd.along * a * t1 + sd.across * b * (g1 / length),
			sd.along * a * t2 + sd.across * b * (g2 / length)
		])
	);
}
