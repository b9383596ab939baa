import { computeCholesky, solveWithCholesky } from '../linear-algebra/cholesky.ts';
import { crossProduct, scaleMatrix } from '../linear-algebra/matrix.ts';
import { computeSymmetricEigen } from '../linear-algebra/symmetric-eigen.ts';
import { dot, row, subtract, type Matrix, type Vector } from '../linear-algebra/vector.ts';
import { computeFreeDirections } from '../tasks/free-directions.ts';
import { computeTangent, projectToManifold } from '../tasks/project-to-manifold.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import { findLargerMode } from '../variability/bimodality.ts';
import { computeCovariance, computeMean, computeMeanVector } from '../variability/moments.ts';
import { poolWithPrior, PRIOR_WEIGHT } from '../variability/pool-covariance.ts';
import { detrendExecutions } from '../variability/stationarity.ts';
import { compareWithReference } from './change-level.ts';
import type { GateFacts } from './decision.ts';
import { checkGates, findTrialCountMin, isOff } from './gates.ts';
import type { BlockSummary } from './policy-memory.ts';
import type { LastBlock } from './policy-state.ts';
import { scaleTrials } from './scale-trials.ts';
import { poolBlocks, summariseBlock } from './summarise-block.ts';
import { isOnCurve, type Turn } from './turn.ts';

/** Fewest trials that an earlier cloud can hold up. */
const POOLED_MIN = 8;
/** Share of the trials from which the larger of two clouds stands for the person. */
const MODE_SHARE_MIN = 0.65;

/** A plain block through the gates, and what remains of it. */
interface Gated {
	readonly codes: string[];
	/** The block as it was, and the cloud that is used of it. */
	readonly whole: BlockSummary;
	readonly used: BlockSummary;
}

/** A plain block: gates, cloud, learning curve, dead band. */
export function absorbPlainBlock(turn: Turn, last: LastBlock): void {
	const { executions, undefinedCount } = scaleTrials(turn.task, last.trials);
	const isFew = executions.length < findTrialCountMin(turn.task.variableCount);
	if (isFew) absorbFew(turn, executions);
	else absorbFull(turn, last, executions);
	if (undefinedCount > 0 && turn.facts.gates)
		turn.facts.gates.undefinedResultCount = undefinedCount;
}

/** Too few trials for a cloud of their own: held up by the reference, if there is one. */
function absorbFew({ memory, facts, task }: Turn, executions: Matrix): void {
	const n = executions.length;
	memory.lastGates = ['FEW'];
	facts.gates = { codes: ['FEW'], n };
	if (n < POOLED_MIN || !memory.ref) return;
	const summary = summariseBlock(task, executions);
	const cov = poolWithPrior({ base: memory.ref.cov, sample: summary.cov, trialCount: n });
	memory.cloud = { ...summary, cov, n: n + PRIOR_WEIGHT };
	memory.lastGates = ['FEW-POOLED'];
}

function absorbFull(turn: Turn, last: LastBlock, executions: Matrix): void {
	const { memory } = turn;
	const { codes, whole, used } = passGates(turn, executions);
	memory.lastGates = codes.filter((code) => code !== 'OK');
	const isClean = !hasAny(memory.lastGates, ['SINGULAR', 'OUTLIERS', 'BIMODAL', 'DRIFT']);
	if (isClean) {
		const { n, fMean, fSd, r, hit } = whole;
		memory.cloud = used;
		memory.results = [...memory.results, { n, fMean, fSd, r, hit }].slice(-3);
	}
	if (last.kind === 'probe' && memory.whyProbe.includes('escaped')) {
		memory.whyProbe = [];
		if (isClean) takeAsReference(turn, used);
	} else if (memory.settled && isClean) watchBand(turn, used);
	else if (isOnCurve(last.kind) && !memory.settled) addToCurve(turn, used);
}

/** After an escape the probe shows where the person is now. */
function takeAsReference({ memory }: Turn, used: BlockSummary): void {
	memory.settled = true;
	memory.ref = poolBlocks([used]);
	memory.plain = [used];
	memory.suspect = 0;
	memory.offer = null;
}

function watchBand({ memory, facts, settings }: Turn, used: BlockSummary): void {
	if (!memory.ref) return;
	const band = compareWithReference(memory.ref, used, settings.band);
	facts.band = band;
	const isChanged = band.level === 2 || (band.level === 1 && memory.suspect === 1);
	if (!isChanged) {
		memory.suspect = band.level === 1 ? 1 : 0;
		return;
	}
	memory.settled = false;
	memory.plain = [used];
	memory.suspect = 0;
	memory.offer = null;
	memory.changed = true;
	memory.stuckSeen = false;
}

function addToCurve({ memory, settings }: Turn, used: BlockSummary): void {
	if (hasAny(memory.lastGates, ['SINGULAR', 'OUTLIERS', 'BIMODAL'])) return;
	memory.plain = [...memory.plain, used].slice(-settings.settle.maxBlocks);
}

function passGates(turn: Turn, executions: Matrix): Gated {
	const { memory, facts, task } = turn;
	const whole = summariseBlock(task, executions);
	const tangent = findTangent(task, whole);
	const verdict = checkGates({
		...{ executions, tangent, tolerance: task.tolerance, resolution: task.resolution },
		evaluate: (z) => task.evaluate(z),
		lagOne: computeMean([...memory.plain.map(({ r }) => r), whole.r])
	});
	const gates: GateFacts = { codes: [...verdict.codes], ...verdict.statistics };
	facts.gates = gates;
	const mode = keepLargerMode({ turn, executions, whole, tangent, gates });
	return keepDrifting({ turn, executions, gates, gated: mode });
}

function findTangent(task: ScaledTask, whole: BlockSummary): Vector | null {
	const hasVolume = computeCholesky(whole.cov).ok;
	const nearest = hasVolume
		? projectToManifold({ task, mean: whole.mean, covariance: whole.cov })
		: null;
	const place = nearest?.ok ? nearest.point : whole.mean;
	if (task.resultCount === 1) return computeTangent(task, place);
	const isCurve = task.variableCount - task.resultCount === 1;
	return isCurve ? (computeFreeDirections(task, place)?.[0] ?? null) : null;
}

interface GateStep {
	readonly turn: Turn;
	readonly executions: Matrix;
	readonly gates: GateFacts;
}

/** Two clouds: when one holds most trials, it is the person's and the other an exit they know. */
function keepLargerMode(step: GateStep & { whole: BlockSummary; tangent: Vector | null }): Gated {
	const { turn, executions, gates, whole, tangent } = step;
	if (!gates.codes.includes('BIMODAL')) return { codes: gates.codes, whole, used: whole };
	// The trimmed trials are the smaller mode, not a fault of the rig.
	const codes = gates.codes.filter((code) => code !== 'OUTLIERS');
	const [byAxis = 0, byTangent = -1] = gates.splitD ?? [];
	const axis = tangent && byTangent > byAxis ? tangent : findMajorAxis(whole);
	const larger = findLargerMode(executions.map((z) => dot(z, axis)));
	gates.modeShare = larger.length / executions.length;
	const isEnough = larger.length >= findTrialCountMin(turn.task.variableCount);
	const used = summariseBlock(
		turn.task,
		larger.map((i) => row(executions, i))
	);
	if (gates.modeShare < MODE_SHARE_MIN || !isEnough || !computeCholesky(used.cov).ok)
		return { codes, whole, used: whole };
	const rest = codes.filter((code) => code !== 'BIMODAL' && code !== 'OFF');
	const off = isOff(turn.task.evaluate(used.mean), turn.task.tolerance) ? ['OFF'] : [];
	return { codes: [...rest, ...off, 'MODE'], whole, used };
}

function findMajorAxis({ cov }: BlockSummary): Vector {
	return row(computeSymmetricEigen(cov).vectors, cov.length - 1);
}

/** Drift: the first time a repeat; the second time the last third stands, if it moved little. */
function keepDrifting(step: GateStep & { gated: Gated }): Gated {
	const { turn, executions, gates, gated } = step;
	const { memory, settings } = turn;
	if (!gated.codes.includes('DRIFT')) {
		memory.driftRun = 0;
		return gated;
	}
	memory.driftRun += 1;
	const third = Math.floor(executions.length / 3);
	const end = computeMeanVector(executions.slice(-third));
	gates.driftSd = computeSdBetween(executions, computeMeanVector(executions.slice(0, third)), end);
	if (memory.driftRun < 2 || gates.driftSd >= settings.driftKeepSd) return gated;
	const rest = detrendExecutions(executions);
	const cov = scaleMatrix(crossProduct(rest), 1 / (executions.length - 2));
	return {
		whole: gated.whole,
		codes: [...gated.codes.filter((code) => code !== 'DRIFT'), 'DRIFT-USED'],
		used: { ...gated.whole, mean: end, cov }
	};
}

/** Distance of two places in SD of the cloud. */
function computeSdBetween(executions: Matrix, from: Vector, to: Vector): number {
	const factor = computeCholesky(computeCovariance(executions));
	if (!factor.ok) throw new RangeError('drift is judged only on a cloud with a volume');
	const delta = subtract(to, from);
	return Math.sqrt(dot(delta, solveWithCholesky(factor.lower, delta)));
}

function hasAny(codes: readonly string[], wanted: readonly string[]): boolean {
	return codes.some((code) => wanted.includes(code));
}
