import { createHash } from 'node:crypto';
import { z } from 'zod';
import { ENGINE_VERSION } from '../../engine-version.ts';
import { placeLeaningRegion, placeRegion } from '../../perturbations/place-region.ts';
import { preparePlacement } from '../../perturbations/prepare-placement.ts';
import { checkPolicy } from '../../policies/check-policy.ts';
import { decideNextBlock } from '../../policies/decide.ts';
import { decisionInputsSchema, decisionRecordSchema } from '../../policies/decision-record.ts';
import { checkGates } from '../../policies/gates.ts';
import { policySettingsSchema } from '../../policies/policy-settings.ts';
import { replayDecision } from '../../policies/replay-decision.ts';
import { createTask } from '../../tasks/create-task.ts';
import { computeTangent, projectToManifold } from '../../tasks/project-to-manifold.ts';
import { createScaledTask } from '../../tasks/scaled-task.ts';
import { computeCovariance, computeMeanVector } from '../../variability/moments.ts';
import { estimateLagOne } from '../../variability/serial-dependence.ts';
import { command, type CommandGroup } from '../command.ts';
import { describeEscape, escapeInputSchema, escapeOutputSchema } from '../describe-escape.ts';
import { describeStudy, studyInputSchema, studyOutputSchema } from '../describe-study.ts';
import { pairPeople, yokeInputSchema, yokeOutputSchema } from '../pair-people.ts';
import { runShift, shiftStepInputSchema, shiftStepOutputSchema } from '../run-shift.ts';
import { readableTaskSchema, trialsInputSchema } from '../trial-inputs.ts';

const numbers = z.array(z.number());

const severalTrials = trialsInputSchema.refine(({ trials }) => trials.length >= 3, {
	error: 'at least three trials are needed',
	path: ['trials']
});

const gatesSchema = z.strictObject({
	codes: z.array(z.string()).min(1).describe('OK, or every gate that is closed'),
	statistics: z.strictObject({
		cond: z.number().optional(),
		minSd: z.number().optional(),
		outlierShare: z.number().optional(),
		splitD: numbers.optional(),
		bimodality: numbers.optional(),
		pHalves: z.number().optional(),
		pTrend: z.number().optional()
	})
});

const regionInputSchema = z.strictObject({
	task: readableTaskSchema,
	trials: z.array(numbers).min(3),
	protocol: policySettingsSchema.prefault({})
});

const placedSchema = z.union([
	z.looseObject({
		ok: z.literal(true),
		region: z.looseObject({ share: z.number(), center: numbers, shape: z.array(numbers) }),
		nearest: z.looseObject({}),
		rungs: z.array(z.looseObject({ share: z.number() }))
	}),
	z.looseObject({ ok: z.literal(false), reason: z.string() })
]);

const checkInputSchema = z.strictObject({
	protocol: policySettingsSchema.prefault({}),
	operatorsAreBlinded: z.boolean().default(true)
});
const checkOutputSchema = z.strictObject({
	concerns: z.array(z.strictObject({ code: z.string(), isRefusal: z.boolean(), text: z.string() }))
});

const decideSchema = z.strictObject({ ...decisionInputsSchema.shape, task: readableTaskSchema });

const recordSchema = z.looseObject({ recordVersion: z.literal(1), inputs: decideSchema });

/** A record alone is made again from its own inputs; with inputs beside it, from those. */
const replaySchema = z.union([
	z.strictObject({
		/** A record as `decide` gives it and the application stores it. */
		stored: recordSchema,
		/** Trials, memory, policy and task as they stand now. */
		inputs: decideSchema
	}),
	recordSchema
]);

const replayedSchema = z.union([
	z.strictObject({ equal: z.literal(true), sameVersions: z.boolean() }),
	z.looseObject({
		equal: z.literal(false),
		cause: z.enum(['record-altered', 'input-changed', 'other-version', 'answer-differs']),
		path: z.string(),
		name: z.string(),
		withinTolerance: z.boolean()
	})
]);

/** Policies on the command line. */
export const POLICY_COMMANDS: CommandGroup = {
	gates: command(
		'Whether trials show one steady cloud on the target',
		{ input: severalTrials, output: gatesSchema },
		judgeTrials
	),
	'place-region': command(
		'Where a penalized region would be placed',
		{ input: regionInputSchema, output: placedSchema },
		place
	),
	escape: command(
		'How far a person moved out of a penalized region, and whether they came back',
		{ input: escapeInputSchema, output: escapeOutputSchema },
		describeEscape
	),
	'shift-step': command(
		'The levels of a target shift over the trials of a block',
		{ input: shiftStepInputSchema, output: shiftStepOutputSchema },
		runShift
	),
	yoke: command(
		'Yoked pairs from baselines; the next block of a partner is decided by “decide”',
		{ input: yokeInputSchema, output: yokeOutputSchema },
		pairPeople
	),
	'check-policy': command(
		'What a policy asks for that its measured properties speak against',
		{ input: checkInputSchema, output: checkOutputSchema },
		({ protocol, operatorsAreBlinded }) => ({
			concerns: checkPolicy(protocol, { operatorsAreBlinded })
		})
	),
	'simulate-study': command(
		'A study of model learners under the policy that would run it, group by group',
		{ input: studyInputSchema, output: studyOutputSchema },
		(input) => describeStudy(input)
	),
	decide: command(
		'The next block, with reasons, as a record to store',
		{ input: decideSchema, output: decisionRecordSchema },
		(input) => decideNextBlock({ ...input, versions: currentVersions(), digest })
	),
	replay: command(
		'Makes a stored record again and names the first difference',
		{ input: replaySchema, output: replayedSchema },
		(input) => replayDecision({ ...splitReplay(input), versions: currentVersions(), digest })
	)
};

function splitReplay(input: z.output<typeof replaySchema>) {
	if (!('stored' in input)) return { stored: input, inputs: input.inputs };
	const asked = replaySchema.options[0].parse(input);
	return { stored: asked.stored, inputs: asked.inputs };
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
