import {
	placedRegionSchema,
	regionSchema,
	type PlacedRegion
} from '$scheduler/perturbations/region-settings';
import type { DecisionRecord } from '$scheduler/policies/decision-record';
import { createTask } from '$scheduler/tasks/create-task';
import { projectToManifold } from '$scheduler/tasks/project-to-manifold';
import { createScaledTask, type ScaledTask } from '$scheduler/tasks/scaled-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { traceManifold } from '$scheduler/tasks/trace-manifold';

/** An ellipsoid in the task's units: {x : (x − center)ᵀ · shape⁻¹ · (x − center) = 1}. */
export type InUnits = { center: number[]; shape: number[][] };

export type PicturedWay = {
	region: (InUnits & { label: string }) | null;
	/** Where the person is expected to go; null where no way out was computed. */
	expected: InUnits | null;
};

/**
 * The penalized region and where the person is expected to go, in the task's units; any count of
 * variables and results. A region of a yoked arm may bring no way out of its own.
 */
export function pictureWay(record: DecisionRecord, own: InUnits): PicturedWay {
	const region = regionSchema.safeParse(record.parameters.region);
	if (!region.success) return { region: null, expected: null };
	const task = createScaledTask(createTask(record.inputs.task));
	const { center, centerInUnits, shape, share } = region.data;
	const drawn = {
		center: centerInUnits ?? task.toUnits(center),
		shape: scaleShape(shape, record.inputs.task.variables),
		label: `penalized region, catches ${Math.round(share * 100)} %`
	};
	const placed = placedRegionSchema.safeParse(region.data);
	const exit = placed.success ? findExit(record, task, placed.data) : null;
	return { region: drawn, expected: exit && { center: exit, shape: own.shape } };
}

/** The place of the nearest way out: as recorded, or followed along the line of solutions. */
function findExit(
	record: DecisionRecord,
	task: ScaledTask,
	{ center, shape, k, nearest, exitInUnits }: PlacedRegion
): number[] | null {
	if (exitInUnits) return exitInUnits;
	const covariance = shape.map((row) => row.map((value) => value / (k * k)));
	const start = projectToManifold({ task, mean: center, covariance });
	if (!start.ok) return null;
	const { step } = record.inputs.protocol.place;
	const trace = traceManifold(task, start.point, { length: Math.abs(nearest) + step, step });
	const branch = nearest >= 0 ? trace.plus : trace.minus;
	const found = branch.find((point) => Math.abs(point.s) >= Math.abs(nearest) - step / 2);
	return found ? task.toUnits(found.z) : null;
}

function scaleShape(shape: number[][], variables: TaskRecord['variables']): number[][] {
	return shape.map((row, i) =>
		row.map((value, j) => value * (variables[i]?.scale ?? 1) * (variables[j]?.scale ?? 1))
	);
}
