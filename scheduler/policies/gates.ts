import { computeSymmetricEigen } from '../linear-algebra/symmetric-eigen.ts';
import { column, dot, entry, row, type Matrix, type Vector } from '../linear-algebra/vector.ts';
import {
	BIMODALITY_UNIFORM,
	computeBimodalityCoefficient,
	findBestSplit,
	findSplitLimit
} from '../variability/bimodality.ts';
import { computeCovariance, computeMeanVector } from '../variability/moments.ts';
import { testHalves, testTrend } from '../variability/stationarity.ts';
import { computeMad, trimOutliers } from '../variability/trim-outliers.ts';

export type GateCode =
	| 'OK'
	| 'FEW'
	| 'FEW-POOLED'
	| 'SINGULAR'
	| 'OUTLIERS'
	| 'BIMODAL'
	| 'MODE'
	| 'DRIFT'
	| 'DRIFT-USED'
	| 'OFF';

/** Numbers behind the gates; each only where it was computed. */
export interface GateStatistics {
	/** Largest by smallest eigenvalue of the scaled covariance. */
	cond?: number;
	/** Smallest SD in any direction, scaled. */
	minSd?: number;
	outlierShare?: number;
	/** Best split and bimodality coefficient along the major axis and, if there is one, the tangent. */
	splitD?: number[];
	bimodality?: number[];
	/** Hotelling halves and Wilks trend. */
	pHalves?: number;
	pTrend?: number;
}

export interface GateVerdict {
	readonly codes: GateCode[];
	readonly statistics: GateStatistics;
}

export interface GateRequest {
	/** (trials × d), scaled, in order. */
	readonly executions: Matrix;
	evaluate(z: Vector): number;
	/** Direction of the manifold near the mean; null: none, only the major axis is looked at. */
	readonly tangent: Vector | null;
	readonly tolerance: number;
	/** Smallest SD that the rig can measure, scaled. */
	readonly resolution: number;
	/** Lag-1 correlation of the trials. */
	readonly lagOne: number;
	readonly trialCountMin?: number;
}

const COND_MAX = 1e6;
const OUTLIER_SHARE_MAX = 0.2;
const DRIFT_ALPHA = 0.005;
/** Keeps the condition number finite when all trials are alike in one direction. */
const EIGENVALUE_FLOOR = 1e-300;

/** Fewest trials that make a cloud of d variables. */
export function findTrialCountMin(variableCount: number): number {
	return Math.max(12, 4 * variableCount + 4);
}

/**
 * Checks whether a plain block shows one steady cloud on the target, before anything is built on it.
 *
 * Shapes:  executions (trials × d).
 * Decision: order and place of the trials, tolerance, resolution.
 * Source:  method sheet D4; case policy-gates. Accuracy: statistics to 1e-6.
 */
export function checkGates(request: GateRequest): GateVerdict {
	const { executions, tolerance } = request;
	const d = row(executions, 0).length;
	if (executions.length < (request.trialCountMin ?? findTrialCountMin(d)))
		return { codes: ['FEW'], statistics: {} };
	const { values, vectors } = computeSymmetricEigen(computeCovariance(executions));
	const [least, most] = [entry(values, 0), entry(values, d - 1)];
	const spread: GateStatistics = {
		cond: most / Math.max(least, EIGENVALUE_FLOOR),
		minSd: Math.sqrt(Math.max(least, 0))
	};
	const codes: GateCode[] = [];
	let statistics = spread;
	if (isSingular(executions, least, spread, request.resolution)) codes.push('SINGULAR');
	else {
		const checked = checkShape(request, row(vectors, d - 1));
		if (!checked) return { codes: ['SINGULAR'], statistics };
		codes.push(...checked.codes);
		statistics = { ...spread, ...checked.statistics };
	}
	if (isOff(request.evaluate(computeMeanVector(executions)), tolerance)) codes.push('OFF');
	return { codes: codes.length > 0 ? codes : ['OK'], statistics };
}

/** Whether the mean lies so far from the solutions that the person does not hit with it. */
export function isOff(resultOfMean: number, tolerance: number): boolean {
	return !(Math.abs(resultOfMean) <= 2 * tolerance);
}

function isSingular(
	executions: Matrix,
	leastEigenvalue: number,
	{ cond = 0 }: GateStatistics,
	resolution: number
): boolean {
	if (leastEigenvalue < resolution ** 2 || cond > COND_MAX) return true;
	return row(executions, 0).some((_, axis) => computeMad(column(executions, axis)) === 0);
}

/** Outliers, two clouds and drift; null when the trials leave no cloud to look at. */
function checkShape(request: GateRequest, majorAxis: Vector): GateVerdict | null {
	const { executions } = request;
	const trimmed = trimOutliers(executions);
	const halves = testHalves(executions, request.lagOne);
	const trend = testTrend(executions, request.lagOne);
	if (!trimmed.ok || !halves.ok || !trend.ok) return null;
	const axes = request.tangent ? [majorAxis, request.tangent] : [majorAxis];
	const lines = axes.map((axis) => executions.map((execution) => dot(execution, axis)));
	const splitD = lines.map((line) => findBestSplit(line).separation);
	const bimodality = lines.map(computeBimodalityCoefficient);
	const outlierShare = 1 - trimmed.kept.filter(Boolean).length / executions.length;
	const limit = findSplitLimit(executions.length);
	const codes: GateCode[] = [];
	if (outlierShare > OUTLIER_SHARE_MAX) codes.push('OUTLIERS');
	if (splitD.some((D, i) => D > limit && entry(bimodality, i) > BIMODALITY_UNIFORM))
		codes.push('BIMODAL');
	if (Math.min(halves.probability, trend.probability) < DRIFT_ALPHA) codes.push('DRIFT');
	const tests = { pHalves: halves.probability, pTrend: trend.probability };
	return { codes, statistics: { outlierShare, splitD, bimodality, ...tests } };
}
