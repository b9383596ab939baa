import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { placeRegion } from '../../scheduler/perturbations/place-region.ts';
import { preparePlacement } from '../../scheduler/perturbations/prepare-placement.ts';
import { computeRSequence } from '../../scheduler/statistics/r-sequence.ts';
import { placementSettingsSchema } from '../../scheduler/perturbations/region-settings.ts';
import { shiftRuleSchema } from '../../scheduler/perturbations/shift-rule.ts';
import { TargetShift } from '../../scheduler/perturbations/target-shift.ts';
import { computeCloudGeometry } from '../../scheduler/policies/cloud-geometry.ts';
import { checkGates } from '../../scheduler/policies/gates.ts';
import { createTask } from '../../scheduler/tasks/create-task.ts';
import { createScaledTask } from '../../scheduler/tasks/scaled-task.ts';
import { taskRecordSchema } from '../../scheduler/tasks/task-record.ts';
import { findSplitLimit } from '../../scheduler/variability/bimodality.ts';
import { computeCovariance, computeMeanVector } from '../../scheduler/variability/moments.ts';
import { findCase, matrix, numbers, readDataset } from './reference-values.ts';
import { expectLike } from './expect-like.ts';
import { expectNumbers } from './expect-numbers.ts';
import { useEngineNames } from '../../scheduler/cli/verify/sheet-names.ts';

describe('placement', () => {
	it('finds the region of the thrown-ball case', () => {
		const { inputs, expected } = findCase('policy-placement-projectile');
		const [origin, scale] = [numbers.parse(inputs['origin']), numbers.parse(inputs['scale'])];
		const bounds = matrix.parse(inputs['bounds']);
		const { h, D, H, g, tolerance } = inputs;
		const variables = ['v', 'theta_deg'].map((name, i) => {
			const [min = 0, max = 0] = bounds[i] ?? [];
			return { ...{ name, unit: '', min, max, origin: origin[i], scale: scale[i] } };
		});
		const record = taskRecordSchema.parse({
			...{ type: 'projectile', h, D, H, g, tolerance, variables }
		});
		const task = createScaledTask(createTask(record));
		const trials = readDataset('projectile_cloud').map((x) => task.toScaled(x));
		const cloud = {
			n: trials.length,
			mean: computeMeanVector(trials),
			cov: computeCovariance(trials)
		};
		// The case was made before edges and cover were looked at.
		const {
			L_max,
			D_min,
			D_max,
			S_min,
			S_rel,
			N,
			k_exit,
			h: step,
			shares,
			leak_min
		} = z.looseObject({ shares: numbers }).parse(inputs['config']);
		const settings = placementSettingsSchema.parse({
			...{ shares, exitWidth: k_exit, lengthMax: L_max, step, leakMin: leak_min, pointCount: N },
			...{ reachMinSd: D_min, reachMaxSd: D_max, successMin: S_min, successRelativeMin: S_rel },
			...{ edgeMax: null, coverMax: null }
		});
		const prepared = preparePlacement({ task, cloud, settings });
		if (!prepared.ok) throw new RangeError(prepared.reason);
		const choice = placeRegion(prepared.ground, settings.shares);
		const { share, k, hit0, stay_success, reach_sd, sd_tangent, z0, nearest, ladder } = expected;
		// One trace step of .02, or one point in 2048.
		const tolerances = {
			...{ k: 1e-9, hit0: 5e-4, staySuccess: 5e-4, reachSd: 0.03, sdTangent: 1e-6, z0: 1e-9 },
			...{ exitPlus: 0.0201, exitMinus: 0.0201, s: 0.0201, hit: 0.01, success: 0.01 }
		};
		expect(choice.ok).toBe(true);
		if (!choice.ok) return;
		expectLike(
			{ ...choice.region, ...prepared.ground, staySuccess: choice.region.stay },
			useEngineNames({ share, k, hit0, stay_success, reach_sd, sd_tangent, z0 }),
			tolerances
		);
		const { s, hit, success, x } = z.looseObject({ x: numbers }).parse(nearest);
		expectLike(choice.nearest, { s, hit, success }, tolerances);
		expectNumbers(task.toUnits(choice.nearest.z), x, { abs: 0.05 });
		expectLike(choice.rungs, useEngineNames(ladder), tolerances);
	});

	it('spreads its points as the R-sequence', () => {
		const { expected, tolerance } = findCase('r-sequence');
		expectNumbers(computeRSequence(4, 2), expected['points'], tolerance);
	});
});

describe('gates', () => {
	const { expected, inputs } = findCase('policy-gates');
	const verdicts = z
		.record(z.string(), z.object({ codes: z.array(z.string()), stats: z.unknown() }))
		.parse(expected);

	it.each(Object.entries(verdicts))('judges the block “%s” as the prototype', (name, wanted) => {
		const { codes, statistics } = checkGates({
			executions: readDataset(`gate_${name}`),
			evaluate: ([a = 0, b = 0]) => a + b,
			tangent: numbers.parse(inputs['tangent']),
			...{ tolerance: 1, resolution: 0.001, lagOne: 0 }
		});
		expect(codes).toEqual(wanted.codes);
		// The condition number of a flat cloud is about 1e300: relative.
		const { cond = 0, ...rest } = statistics;
		const stats = Object(useEngineNames(wanted.stats));
		if (stats.cond !== undefined) expectNumbers(cond, stats.cond, { rel: 1e-9, abs: 1e-6 });
		delete stats.cond;
		const tolerances = Object.fromEntries(Object.keys(stats).map((key) => [key, 1e-6]));
		expectLike(rest, stats, tolerances);
	});

	it('uses the 99 % points of the best split of normal samples', () => {
		const { inputs: given, expected: table, tolerance } = findCase('bimodality-null');
		const limits = numbers.parse(given['n']).map(findSplitLimit);
		expectNumbers(
			limits,
			matrix.parse(table['table']).map((row) => row[2]),
			tolerance
		);
	});

	it('measures the angle between cloud and solutions', () => {
		const { expected: wanted, tolerance } = findCase('alignment-two-finger');
		const variables = ['F1', 'F2'].map((name) => ({
			...{ name, unit: 'N', min: 0, max: 40, origin: 0, scale: 1 }
		}));
		const executions = readDataset('two_finger');
		const mean = computeMeanVector(executions);
		const record = { type: 'linear', coef: [1, 1], target: 20, tolerance: 1, variables };
		const task = createScaledTask(createTask(taskRecordSchema.parse(record)));
		const geometry = computeCloudGeometry(task, {
			...{ n: executions.length, mean, cov: computeCovariance(executions) }
		});
		expectNumbers(geometry.alignmentDeg, wanted['angle_deg'], tolerance);
		expectNumbers(Math.sqrt(geometry.eigenvalueRatio), wanted['aspect_ratio'], tolerance);
	});
});

describe('TargetShift', () => {
	it('follows the typical learner of the sheet trial by trial', () => {
		const { inputs, expected } = findCase('policy-shift-typical');
		const { a, b } = z.looseObject({ a: z.number(), b: z.number() }).parse(inputs['learner']);
		const shift = new TargetShift(shiftRuleSchema.parse({ sigma: 1, goal: 3 }));
		let adapted = 0;
		for (const [noise = 0] of readDataset('shift_noise')) {
			if (shift.dump().status !== 'run') break;
			const { level } = shift;
			const error = level - (adapted + noise);
			shift.observe({ error, hit: null, leftToday: null, isLastOfBlock: false });
			adapted = a * adapted + b * error;
		}
		const { theta, passed, status, trial, holdMax, rate } = shift.dump();
		expectNumbers([theta, passed, trial, holdMax], [3, 3, expected['trials'], expected['H_max']], {
			abs: 1e-9
		});
		expectNumbers(rate, expected['b_hat'], { abs: 1e-9 });
		expect(status).toBe(expected['state']);
		expectLike(shift.log, useEngineNames(expected['log']), { thetaAfter: 1e-9 });
	});
});
