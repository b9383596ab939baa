import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { chooseNextBlock } from '../../scheduler/policies/choose-next-block.ts';
import { createEmptyMemory } from '../../scheduler/policies/policy-memory.ts';
import { policySettingsSchema } from '../../scheduler/policies/policy-settings.ts';
import { createTask } from '../../scheduler/tasks/create-task.ts';
import { createScaledTask } from '../../scheduler/tasks/scaled-task.ts';
import { taskRecordSchema } from '../../scheduler/tasks/task-record.ts';
import {
	computeCoverageFactor,
	computeMeanFactor,
	computeNextTrialFactor
} from '../../scheduler/variability/ellipsoid-factors.ts';
import { computeCovariance, computeMeanVector } from '../../scheduler/variability/moments.ts';
import { computeToleranceFactor } from '../../scheduler/variability/tolerance-factor.ts';
import { expectLike } from './expect-like.ts';
import { useEngineNames } from '../../scheduler/cli/verify/sheet-names.ts';

/** Simulated blocks; expected values by the method sheet's own prototype, see tests/data/README.md. */
const folder = new URL('../data/puck_blocks/', import.meta.url);
const read = (name: string) => readFileSync(new URL(name, folder), 'utf8');

const blockSchema = z.looseObject({
	day: z.number(),
	block: z.number(),
	trials: z.number(),
	hits: z.number(),
	mean_error: z.number(),
	mean_abs_error: z.number(),
	factors_c2_at_0_9: z.object({
		coverage: z.number(),
		mean: z.number(),
		next_trial: z.number(),
		tolerance_0_9_with_confidence_0_95: z.number()
	}),
	gates: z.looseObject({ codes: z.array(z.string()) }),
	decision: z.looseObject({ kind: z.string(), code: z.string() })
});
const expectedSchema = z.object({
	protocol: z.unknown(),
	rows: z.number(),
	participants: z.array(z.object({ participant: z.string(), blocks: z.array(blockSchema) }))
});
type ExpectedBlock = z.output<typeof blockSchema>;

const expected = expectedSchema.parse(JSON.parse(read('expected.json')));
const record = taskRecordSchema.parse(useEngineNames(JSON.parse(read('task.json'))));
const settings = policySettingsSchema.parse(useEngineNames(expected.protocol));
const task = createTask(record);
const scaled = createScaledTask(task);

/** Executions of each participant, day and block, in file order. */
const rows = read('trials.csv')
	.trim()
	.split(/\r?\n/)
	.slice(1)
	.map((line) => line.split(','));

function listTrials(participant: string, { day, block }: ExpectedBlock): number[][] {
	return rows
		.filter(
			([who, onDay, atBlock]) =>
				who === participant && +(onDay ?? 0) === day && +(atBlock ?? 0) === block
		)
		.map((row) => [Number(row[4]), Number(row[5])]);
}

/** Absolute tolerances of tests/data/puck_blocks/README.md: .02 a step, one point in 2048. */
const STEP = 0.0201;
const COUNT = 1 / 2048 + 1e-12;
const TOLERANCES = {
	...{ exitPlus: STEP, exitMinus: STEP, nearest: STEP, reachSd: 0.03 },
	...{ stay: COUNT, hit0: COUNT, nearestSuccess: 0.01, staySuccess: COUNT },
	...{ center: 1e-9, shape: 1e-9, centerInUnits: 1e-9, k: 1e-9, lean: 1e-12, cover: 0.002 },
	...{ cond: 1e-6, minSd: 1e-9, outlierShare: 1e-12, splitD: 1e-6, bimodality: 1e-6 },
	...{ pHalves: 1e-6, pTrend: 1e-6, distance: 1e-9, limit: 1e-9, limitStrict: 1e-9, pPlace: 1e-6 },
	...{ alignmentDeg: 1e-6, eigenvalueRatio: 1e-8, sdTangent: 1e-9, driftSd: 1e-6 }
};

describe.each(expected.participants)('puck blocks of $participant', ({ participant, blocks }) => {
	let memory = createEmptyMemory();
	it.each(blocks)('day $day, block $block: the same numbers and the same decision', (block) => {
		const trials = listTrials(participant, block);
		const kind = block.day === 1 ? 'baseline' : 'practice';
		expectCloud(trials, block);
		const decision = chooseNextBlock({
			state: { day: block.day, blockInDay: block.block, last: { kind, trials }, memory },
			protocol: settings,
			task: record
		});
		memory = decision.memory;
		const { kind: kindWanted, code, parameters, refused } = block.decision;
		expect([decision.kind, decision.reasons[0]?.code]).toEqual([kindWanted, code]);
		expectLike(decision.parameters, useEngineNames(parameters), TOLERANCES);
		expectLike(decision.facts.gates, useEngineNames(block.gates), TOLERANCES);
		const { place, lean, geometry, band, aims } = decision.facts;
		if (block['ladder']) expectLike(place, useEngineNames(block['ladder']), TOLERANCES);
		if (block['ladder_leaning']) expect(lean).toHaveLength(Number(block['ladder_leaning']));
		if (block['geometry']) expectLike(geometry, useEngineNames(block['geometry']), TOLERANCES);
		if (block['dead_band']) expectLike(band, useEngineNames(block['dead_band']), TOLERANCES);
		if (refused) expectLike(aims?.refused, refused, {});
	});
});

describe('tolerance factors of the puck blocks', () => {
	const blocks = expected.participants.flatMap((participant) => participant.blocks);
	// Monte Carlo in R: 3 % for 60 trials, 6 % for 7.
	it.each([
		[60, 0.03],
		[7, 0.06]
	])('agree with Monte Carlo for %d trials', { timeout: 60_000 }, (trialCount, rel) => {
		const block = blocks.find(({ trials }) => trials === trialCount);
		const factor = computeToleranceFactor({
			...{ trialCount, variableCount: 2, share: 0.9, confidence: 0.95 }
		});
		expectRelative(factor, block?.factors_c2_at_0_9.tolerance_0_9_with_confidence_0_95, rel);
	});
});

function expectCloud(trials: number[][], block: ExpectedBlock): void {
	const executions = trials.map((trial) => scaled.toScaled(trial));
	expectRelative(computeMeanVector(trials), block['mean_x'], 1e-10);
	expectRelative(computeCovariance(trials), block['cov_x'], 1e-10);
	expectRelative(computeMeanVector(executions), block['mean_z'], 1e-10);
	expectRelative(computeCovariance(executions), block['cov_z'], 1e-10);
	const errors = trials.map((trial) => task.evaluate(trial));
	expect(trials).toHaveLength(block.trials);
	expect(errors.filter((error) => Math.abs(error) <= task.tolerance)).toHaveLength(block.hits);
	const request = { trialCount: trials.length, variableCount: 2, probability: 0.9 };
	const factors = block.factors_c2_at_0_9;
	expectRelative(computeCoverageFactor(request), factors.coverage, 1e-9);
	expectRelative(computeMeanFactor(request), factors.mean, 1e-9);
	expectRelative(computeNextTrialFactor(request), factors.next_trial, 1e-9);
}

function expectRelative(got: unknown, wanted: unknown, relative: number): void {
	const [a, b] = [got, wanted].map((value) => [value].flat(3).map(Number));
	expect(a).toHaveLength(b?.length ?? -1);
	// Means near 0 are differences of measured values: an absolute part of 1e-13 covers rounding.
	a?.forEach((value, i) =>
		expect(Math.abs(value - (b?.[i] ?? NaN))).toBeLessThanOrEqual(
			relative * Math.abs(value) + 1e-13
		)
	);
}
