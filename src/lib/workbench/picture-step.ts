import type { CloudData, DrawnEllipse, Point } from '$lib/charts/cloud-data';
import type { ExampleStep } from '$scheduler/design/workbench/rule-experiment';
import { computeCholesky } from '$scheduler/linear-algebra/cholesky';
import { createTask } from '$scheduler/tasks/create-task';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { traceZeroSet } from '$scheduler/tasks/trace-zero-set';
import { computeNextTrialFactor } from '$scheduler/variability/ellipsoid-factors';
import { computeCovariance, computeMeanVector } from '$scheduler/variability/moments';

const DRAWN_SHARE = 0.68;

/** The cloud before a block, and the region that the block brings; null where there is no plane. */
export function pictureStep(
	record: TaskRecord,
	before: ExampleStep | undefined,
	{ decision }: ExampleStep
): CloudData | null {
	const [first, second] = record.variables;
	const trials = before?.trials ?? [];
	if (!first || !second || record.variables.length !== 2 || trials.length < 4) return null;
	const task = createTask(record);
	const ellipses: DrawnEllipse[] = [];
	const covariance = computeCovariance(trials);
	if (computeCholesky(covariance).ok) {
		const probability = DRAWN_SHARE;
		const factor = computeNextTrialFactor({
			trialCount: trials.length,
			variableCount: 2,
			probability
		});
		ellipses.push({
			...toEllipse(computeMeanVector(trials), covariance, factor),
			kind: 'own'
		});
	}
	const { region } = decision.parameters;
	if (region) {
		const scaled = createScaledTask(task);
		const center = scaled.toUnits(region.center);
		const unit = [first.scale, second.scale];
		const shape = region.shape.map((row, i) =>
			row.map((value, j) => value * (unit[i] ?? 1) * (unit[j] ?? 1))
		);
		const label = `catches ${Math.round(region.share * 100)} %`;
		ellipses.push({ ...toEllipse(center, shape, 1), kind: 'region', label });
	}
	const points = trials.map((trial): Point => [trial[0] ?? 0, trial[1] ?? 0]);
	const reach = ellipses.flatMap(({ center, shape }): Point[] => {
		const half = [Math.sqrt(shape[0][0]), Math.sqrt(shape[1][1])] as const;
		return [
			[center[0] - half[0], center[1] - half[1]],
			[center[0] + half[0], center[1] + half[1]]
		];
	});
	const axis = (index: 0 | 1, { name, unit }: { name: string; unit: string }) => ({
		...{ label: name.replaceAll('_', ' '), unit },
		domain: widen([...points, ...reach].map((point) => point[index]))
	});
	const [x, y] = [axis(0, first), axis(1, second)];
	const isOne = task.resultCount === 1;
	return {
		...{ x, y, grid: null, tolerance: null, trials: points, ellipses },
		zeroSet: isOne ? traceZeroSet(task, { x: x.domain, y: y.domain }) : [],
		result: { unit: record.resultUnit, factor: 1 },
		zeroLabel: isOne ? 'zero error' : ''
	};
}

function toEllipse(
	center: readonly number[],
	shape: readonly (readonly number[])[],
	factor: number
) {
	const at = (i: number, j: number) => (shape[i]?.[j] ?? 0) * factor;
	return {
		center: [center[0] ?? 0, center[1] ?? 0] as const,
		shape: [
			[at(0, 0), at(0, 1)],
			[at(1, 0), at(1, 1)]
		] as const
	};
}

function widen(values: readonly number[]): [number, number] {
	const [low, high] = [Math.min(...values), Math.max(...values)];
	const air = (high - low || 1) * 0.12;
	return [low - air, high + air];
}
