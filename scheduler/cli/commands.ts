import { createHash } from 'node:crypto';
import { z } from 'zod';
import { ENGINE_VERSION } from '../engine-version.ts';
import { placeLeaningRegion, placeRegion } from '../perturbations/place-region.ts';
import { preparePlacement } from '../perturbations/prepare-placement.ts';
import { decideNextBlock } from '../policies/decide.ts';
import { decisionInputsSchema } from '../policies/decision-record.ts';
import { checkGates } from '../policies/gates.ts';
import { policySettingsSchema } from '../policies/policy-settings.ts';
import { replayDecision } from '../policies/replay-decision.ts';
import { createTask } from '../tasks/create-task.ts';
import { computeTangent, projectToManifold } from '../tasks/project-to-manifold.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { computeCovariance, computeMeanVector } from '../variability/moments.ts';
import { estimateLagOne } from '../variability/serial-dependence.ts';
import { cloudInputSchema, describeCloud } from './describe-cloud.ts';
import { computeOutcome, readableTaskSchema, trialsInputSchema } from './trial-inputs.ts';

/** One thing the engine can be asked on the command line. */
export interface Command {
	readonly about: string;
	readonly schema: z.ZodType;
	run(input: unknown): unknown;
}

const severalTrials = trialsInputSchema.refine(({ trials }) => trials.length >= 3, {
	error: 'at least three trials are needed',
	path: ['trials']
});

const regionInputSchema = z.strictObject({
	task: readableTaskSchema,
	trials: z.array(z.array(z.number())).min(3),
	protocol: policySettingsSchema.prefault({})
});

const decideSchema = z.strictObject({ ...decisionInputsSchema.shape, task: readableTaskSchema });

const replaySchema = z.strictObject({
	/** A record as `decide` gives it. */
	stored: z.looseObject({}),
	/** Trials, memory, policy and task as they stand now. */
	inputs: decideSchema
});

export const COMMANDS: Readonly<Record<string, Command>> = {
	outcome: command('Result and hit of each trial', trialsInputSchema, computeOutcome),
	cloud: command(
		'Mean, covariance and the four ellipsoids of trials',
		cloudInputSchema,
		describeCloud
	),
	gates: command('Whether trials show one steady cloud on the target', severalTrials, judgeTrials),
	'place-region': command('Where a penalized region would be placed', regionInputSchema, place),
	decide: command('The next block, with reasons, as a record to store', decideSchema, (input) =>
		decideNextBlock({ ...input, versions: currentVersions(), digest })
	),
	replay: command(
		'Makes a stored record again and names the first difference',
		replaySchema,
		(input) => replayDecision({ ...input, versions: currentVersions(), digest })
	)
};

function command<S extends z.ZodType>(
	about: string,
	schema: S,
	run: (input: z.output<S>) => unknown
): Command {
	return { about, schema, run: (input) => run(schema.parse(input)) };
}

function judgeTrials({ task: record, trials }: z.output<typeof trialsInputSchema>) {
	const task = createScaledTask(createTask(record));
	const executions = trials.map((trial) => task.toScaled(trial));
	const mean = computeMeanVector(executions);
	const nearest = projectToManifold({ task, mean, covariance: computeCovariance(executions) });
	const results = executions.map((z) => task.evaluate(z));
	const series = [...mean.map((_, axis) => executions.map((z) => z[axis] ?? 0)), results];
	return checkGates({
		...{ executions, tolerance: task.tolerance, resolution: task.resolution },
		evaluate: (z) => task.evaluate(z),
		tangent: computeTangent(task, nearest.ok ? nearest.point : mean),
		lagOne: estimateLagOne(series)
	});
}

function place({ task: record, trials, protocol }: z.output<typeof regionInputSchema>) {
	const task = createScaledTask(createTask(record));
	const executions = trials.map((trial) => task.toScaled(trial));
	const cov = computeCovariance(executions);
	const cloud = { n: executions.length, mean: computeMeanVector(executions), cov };
	const prepared = preparePlacement({ task, cloud, settings: protocol.place });
	if (!prepared.ok) return prepared;
	const { shares } = protocol.place;
	const centered = placeRegion(prepared.ground, shares);
	if (centered.ok) return centered;
	const { lean: leans, leanCatch: catchMin } = protocol;
	const leaning = placeLeaningRegion(prepared.ground, { shares, leans, catchMin });
	return { ...leaning, rungs: [...centered.rungs, ...leaning.rungs] };
}

function digest(text: string): string {
	return createHash('sha256').update(text).digest('hex');
}

function currentVersions() {
	return { engineVersion: ENGINE_VERSION, runtimeVersion: `node ${process.versions.node}` };
}
