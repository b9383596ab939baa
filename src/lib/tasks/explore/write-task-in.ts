import { multiplyMatrices } from '$scheduler/linear-algebra/matrix';
import type { Task } from '$scheduler/tasks/task';
import type { CoordinateSystem } from '$scheduler/variability/coordinates';

/** A task whose executions are written in another coordinate system; its results are the same. */
export function writeTaskIn(task: Task, system: CoordinateSystem): Task {
	const { assess } = task;
	const jacobian = (z: readonly number[]) =>
		multiplyMatrices(task.jacobian(system.toUnits(z)), system.derivative(z));
	return {
		...task,
		evaluate: (z) => task.evaluate(system.toUnits(z)),
		results: (z) => task.results(system.toUnits(z)),
		gradient: (z) =>
			multiplyMatrices([task.gradient(system.toUnits(z))], system.derivative(z))[0] ?? [],
		jacobian,
		findInvalid: (z) => task.findInvalid(system.toUnits(z)),
		...(assess && { assess: (z) => assess(system.toUnits(z)) })
	};
}
