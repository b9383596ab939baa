import { z } from 'zod';
import { placeRegion } from '../../../perturbations/place-region.ts';
import { preparePlacement } from '../../../perturbations/prepare-placement.ts';
import { placementSettingsSchema } from '../../../perturbations/region-settings.ts';
import { shiftRuleSchema } from '../../../perturbations/shift-rule.ts';
import { TargetShift } from '../../../perturbations/target-shift.ts';
import { checkGates } from '../../../policies/gates.ts';
import { drawNormal } from '../../../random/random-stream.ts';
import { createSeededStream } from '../../../random/seeded-stream.ts';
import { computeRSequence } from '../../../statistics/r-sequence.ts';
import { createTask } from '../../../tasks/create-task.ts';
import { createScaledTask } from '../../../tasks/scaled-task.ts';
import { taskRecordSchema } from '../../../tasks/task-record.ts';
import { quadraticForm } from '../../../linear-algebra/vector.ts';
import { findBestSplit } from '../../../variability/bimodality.ts';
import { computeCovariance, computeMeanVector } from '../../../variability/moments.ts';
import { useSheetNames } from '../sheet-names.ts';
import { firstOf, forInputs, Judged, readNumbers, type TopicGroup } from '../topic.ts';

const numbers = z.array(z.number());

/** The configuration of the sheet's placement; `h` is the step of the trace there. */
const configSchema = z
	.strictObject({
		...{ shares: numbers, k_exit: z.number(), L_max: z.number(), h: z.number() },
		...{ D_min: z.number(), D_max: z.number(), S_min: z.number(), S_rel: z.number() },
		...{ leak_min: z.number(), N: z.number() },
		edge_max: z.number().nullable().default(null),
		cover_max: z.number().nullable().default(null)
	})
	.transform((config) =>
		placementSettingsSchema.parse({
			...{ shares: config.shares, exitWidth: config.k_exit, lengthMax: config.L_max },
			...{ step: config.h, reachMinSd: config.D_min, reachMaxSd: config.D_max },
			...{ successMin: config.S_min, successRelativeMin: config.S_rel },
			...{ leakMin: config.leak_min, pointCount: config.N },
			...{ edgeMax: config.edge_max, coverMax: config.cover_max }
		})
	);

const placement = forInputs(
	z.strictObject({
		dataset: z.string(),
		task: z.literal('height error at D'),
		...{ h: z.number(), D: z.number(), H: z.number(), g: z.number(), tolerance: z.number() },
		config: configSchema,
		...{ scale: numbers, origin: numbers, bounds: z.array(z.tuple([z.number(), z.number()])) }
	}),
	(
		{ dataset, config: settings, scale, origin, bounds, task: _task, ...numbersOfTask },
		datasets
	) => {
		const variables = ['v', 'theta_deg'].map((name, i) => {
			const [min, max] = bounds[i] ?? [0, 0];
			return { ...{ name, unit: '', min, max, origin: origin[i], scale: scale[i] } };
		});
		const record = taskRecordSchema.parse({ type: 'projectile', ...numbersOfTask, variables });
		const task = createScaledTask(createTask(record));
		const trials = readNumbers(datasets, dataset).map((x) => task.toScaled(x));
		const cov = computeCovariance(trials);
		const cloud = { n: trials.length, mean: computeMeanVector(trials), cov };
		const prepared = preparePlacement({ task, cloud, settings });
		if (!prepared.ok) throw new RangeError(`no region can be placed: ${prepared.reason}`);
		const { ground } = prepared;
		const choice = placeRegion(ground, settings.shares);
		const answers = { z0: ground.z0, hit0: ground.here.hitShare, sd_tangent: ground.sdTangent };
		const ladder = choice.rungs.map((rung) => useSheetNames(rung));
		if (!choice.ok) return { ...answers, status: 'no-exit', ladder };
		const { region, nearest } = choice;
		const sens = Math.sqrt(quadraticForm(cov, task.gradient(nearest.z)));
		return {
			...{ ...answers, status: 'placed', ladder, share: region.share, k: region.k },
			...{ stay_success: region.stay, reach_sd: region.reachSd },
			nearest: { ...nearest, x: task.toUnits(nearest.z), sens }
		};
	}
);

const gates = forInputs(
	z.strictObject({
		datasets: z.array(z.string()),
		task: z.literal('f(z)=z1+z2 (scaled)'),
		...{ tangent: numbers, tolerance: z.number(), resolution: z.number() },
		alpha_drift: z.literal(0.005)
	}),
	({ datasets: names, tangent, tolerance, resolution }, datasets) =>
		Object.fromEntries(
			names.map((name) => {
				const { codes, statistics } = checkGates({
					executions: readNumbers(datasets, name),
					evaluate: ([a = 0, b = 0]) => a + b,
					...{ tangent, tolerance, resolution, lagOne: 0 }
				});
				const { cond, ...rest } = statistics;
				// About 1e300 for a flat cloud: only relative digits mean something.
				const judged =
					cond === undefined ? {} : { cond: new Judged(cond, { tolerance: { rel: 1e-6 } }) };
				const stats = { ...Object(useSheetNames(rest)), ...judged };
				return [name.replace(/^gate_/, ''), { codes, stats }];
			})
		)
);

const controllerSchema = z
	.strictObject({
		...{ c1: z.number(), c: z.number(), cap: z.number(), Hmin: z.number(), every: z.number() },
		...{ Hmax: z.number(), grace: z.number(), z: z.number(), rlow: z.number() },
		...{ rhi: z.number(), rmin: z.number(), hit_min: z.number(), hit0: z.number() },
		...{ bias: z.number(), r: z.number(), n0: z.number().nullable() },
		granularity: z.enum(['trial', 'block']),
		personal: z.boolean()
	})
	.transform(({ c1, c, cap, Hmin, every, Hmax, rlow, rhi, rmin, hit_min, ...same }) => ({
		...{ ...same, firstStepSd: c1, stepSd: c, stepCapSd: cap, holdMin: Hmin, lookEvery: every },
		...{ holdMax: Hmax, followedLowMin: rlow, followedMin: rhi, followedLateMin: rmin },
		hitMin: hit_min
	}));

const shift = forInputs(
	z.strictObject({
		...{ noise_dataset: z.string(), sigma: z.number(), goal: z.number() },
		learner: z.looseObject({ a: z.number(), b: z.number() }),
		controller: controllerSchema
	}),
	({ noise_dataset, sigma, goal, learner, controller }, datasets) => {
		const rule = new TargetShift(shiftRuleSchema.parse({ ...controller, sigma, goal }));
		let adapted = 0;
		for (const [noise = 0] of readNumbers(datasets, noise_dataset)) {
			if (rule.dump().status !== 'run') break;
			const error = rule.level - (adapted + noise);
			rule.observe({ error, hit: null, leftToday: null, isLastOfBlock: false });
			adapted = learner.a * adapted + learner.b * error;
		}
		const { theta, passed, status, trial, holdMax, rate } = rule.dump();
		return {
			...{ state: status, trials: trial, theta, passed, H_max: holdMax, b_hat: rate },
			log: rule.log.map((entry) => useSheetNames(entry))
		};
	}
);

/** Seed of the normal samples behind the null of the best split. */
const SPLIT_SEED = 60;

const splitNull = forInputs(
	z.strictObject({ n: numbers, replicates: z.number().int().max(20000), quantiles: numbers }),
	({ n, replicates, quantiles }) => {
		const stream = createSeededStream(SPLIT_SEED);
		const table = n.map((count) => {
			const draw = () => Array.from({ length: count }, () => drawNormal(stream));
			const found = Array.from({ length: replicates }, () => findBestSplit(draw()).separation);
			const sorted = found.sort((a, b) => a - b);
			return quantiles.map((q) => interpolate(sorted, q));
		});
		return { table };
	}
);

/** Quantile of sorted values, linear between them. */
function interpolate(sorted: readonly number[], q: number): number {
	const place = (sorted.length - 1) * q;
	const low = sorted[Math.floor(place)] ?? Number.NaN;
	const high = sorted[Math.ceil(place)] ?? low;
	return low + (high - low) * (place - Math.floor(place));
}

const sequence = forInputs(
	z.strictObject({ d: z.number().int().min(1), first: z.number().int().min(1).max(100000) }),
	({ d, first }) => ({ points: computeRSequence(first, d) })
);

/** Policies in check cases. */
export const POLICY_TOPICS: TopicGroup = {
	policy: firstOf(placement, gates, shift, splitNull, sequence)
};
