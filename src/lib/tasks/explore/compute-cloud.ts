import { entry } from '$scheduler/linear-algebra/vector';
import { createTask } from '$scheduler/tasks/create-task';
import { cutTask } from '$scheduler/tasks/cut-task';
import type { TaskWindow } from '$scheduler/tasks/error-grid';
import { evaluateResultMap } from '$scheduler/tasks/result-map';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import { isHit, type Task } from '$scheduler/tasks/task';
import { returnToManifold } from '$scheduler/tasks/trace-manifold';
import { traceLevel } from '$scheduler/tasks/trace-level';
import { computeNextTrialFactor } from '$scheduler/variability/ellipsoid-factors';
import { computeCovariance, computeMeanVector } from '$scheduler/variability/moments';
import type { CloudPicture, CloudRequest, Panel, PlaneShape } from './cloud-request';
import { compareCloud } from './compare-cloud';
import { drawCloud } from './draw-cloud';
import { computeForgiveness, liftBranch } from './forgiveness';
import { listMapColours } from './map-colours';
import { paintMap } from './paint-map';
import { placeRegion } from './place-region';
import { computeRegionFacts } from './region-facts';
import { listSecondSystems } from './second-systems';
import { traceWholeCurves } from './compute-space';
import { writeTaskIn } from './write-task-in';

/** Half width of a small map, in reaches of the cloud. */
const ZOOM = 1.9;
/** What the drawn ellipse holds of the next trials. */
const NEXT_SHARE = 0.68;
const PANEL_GRID = { quick: [61, 49], slow: [25, 21] } as const;

/** Everything that is shown about a cloud of invented trials. */
export function computeCloud(request: CloudRequest): CloudPicture {
	const { record, axes } = request;
	const task = createTask(record);
	const { center, isOnSolutions } = bringToSolutions(task, request.place);
	const trials = drawCloud(task, { ...request, center });
	const second = listSecondSystems(record).find(({ key }) => key === request.second);
	if (!second) throw new RangeError(`no coordinate system ${request.second}`);
	const comparison = compareCloud({ record, trials, axes, system: second.system });
	const lines = listLines(task, request);
	return {
		...{ center, isOnSolutions, trials, comparison },
		first: drawPanel(task, trials, request),
		second:
			comparison.secondTrials &&
			drawPanel(writeTaskIn(task, second.system), comparison.secondTrials, request),
		forgiveness: computeForgiveness(task, trials, lines.branches),
		isWholeCurve: lines.isWhole,
		here: countShare(task, trials),
		region: measureRegion(task, trials, request)
	};
}

function bringToSolutions(task: Task, place: readonly number[]) {
	const scaled = createScaledTask(task);
	const found = returnToManifold(scaled, scaled.toScaled(place));
	const isUsable = found !== null && scaled.isWithinRanges(found) && !scaled.findInvalid(found);
	return { center: isUsable ? scaled.toUnits(found) : [...place], isOnSolutions: isUsable };
}

/** The curves of perfect trials, whole where there is one free direction, else those of the slice. */
function listLines(task: Task, { lines, axes, point, record }: CloudRequest) {
	const isCurve = task.resultCount > 1 && task.variableCount - task.resultCount === 1;
	if (isCurve) return { branches: traceWholeCurves(record), isWhole: true };
	return { branches: lines.map((line) => liftBranch(line, axes, point)), isWhole: false };
}

function countShare(task: Task, trials: readonly (readonly number[])[]): number {
	return trials.filter((x) => isHit(task, task.evaluate(x))).length / trials.length;
}

function drawPanel(
	task: Task,
	trials: readonly (readonly number[])[],
	{ axes, theme, pixels, top, record }: CloudRequest
): Panel {
	const [i, j] = axes;
	const plane = cutTask(task, axes, computeMeanVector(trials));
	const shown = trials.map((x): [number, number] => [entry(x, i), entry(x, j)]);
	const ellipse = encloseNext(shown);
	const window = chooseWindow(shown);
	const [nx, ny] = record.type === 'cart-pendulum' ? PANEL_GRID.slow : PANEL_GRID.quick;
	const map = evaluateResultMap(plane, window, nx, ny);
	const hasOne = map.results.length === 1;
	const zero = hasOne ? traceLevel(map, 0) : null;
	const edge = (level: number) => (hasOne ? traceLevel(map, level).lines : []);
	const painting = { ...pixels, colours: listMapColours(theme), top, tolerance: task.tolerance };
	return {
		...{ window, trials: shown, ellipse },
		image: { ...pixels, pixels: paintMap(map, { ...painting, jumps: null }) },
		zero: zero?.lines ?? [],
		edges: [...edge(task.tolerance), ...edge(-task.tolerance)]
	};
}

function chooseWindow(trials: readonly (readonly [number, number])[]): TaskWindow {
	const around = (axis: 0 | 1): [number, number] => {
		const values = trials.map((x) => x[axis]);
		const [low, high] = [Math.min(...values), Math.max(...values)];
		const half = ((high - low || 1) / 2) * (ZOOM - 0.5);
		return [(low + high) / 2 - half, (low + high) / 2 + half];
	};
	return { x: around(0), y: around(1) };
}

function encloseNext(trials: readonly (readonly [number, number])[]): PlaneShape | null {
	if (trials.length < 4) return null;
	const factor = computeNextTrialFactor({
		...{ trialCount: trials.length, variableCount: 2, probability: NEXT_SHARE }
	});
	const [[a = 0, b = 0] = [], [, c = 0] = []] = computeCovariance(trials);
	const [x = 0, y = 0] = computeMeanVector(trials);
	if (!(a * c - b * b > 0)) return null;
	return {
		center: [x, y],
		shape: [
			[factor * a, factor * b],
			[factor * b, factor * c]
		]
	};
}

function measureRegion(
	task: Task,
	trials: readonly (readonly number[])[],
	{ region: wish, axes, point, record }: CloudRequest
): CloudPicture['region'] {
	if (!wish) return null;
	const plane = cutTask(task, axes, wish.center.length === point.length ? wish.center : point);
	const placed = placeRegion(task, plane, axes, wish);
	if (!placed) return null;
	const facts = computeRegionFacts({ plane, trials, ...placed });
	const [[a = 0, b = 0] = [], [, c = 0] = []] = placed.planeRegion.shape;
	const [x = 0, y = 0] = placed.planeRegion.center;
	const band = measureBand(plane, record.type === 'cart-pendulum' ? 31 : 201);
	return {
		...facts,
		hitAreaShare: band > 0 ? facts.hitArea / band : null,
		drawn: {
			center: [x, y],
			shape: [
				[a, b],
				[b, c]
			]
		}
	};
}

/** Area of all executions of the plane that hit, within the ranges. */
function measureBand(plane: Task, steps: number): number {
	const [first, second] = plane.variables;
	if (!first || !second) return 0;
	let hits = 0;
	for (let k = 0; k < steps * steps; k++) {
		const x = [
			first.min + (((k % steps) + 0.5) / steps) * (first.max - first.min),
			second.min + ((Math.floor(k / steps) + 0.5) / steps) * (second.max - second.min)
		];
		if (isHit(plane, plane.evaluate(x))) hits++;
	}
	return (hits / steps ** 2) * (first.max - first.min) * (second.max - second.min);
}
