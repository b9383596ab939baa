import { eq, sql } from 'drizzle-orm';
import { readFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { computeSymmetricEigen } from '$scheduler/linear-algebra/symmetric-eigen';
import {
	computeMeanFactor,
	computeNextTrialFactor
} from '$scheduler/variability/ellipsoid-factors';
import { computeCovariance, computeMeanVector } from '$scheduler/variability/moments';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { block, participant, upload } from '$lib/server/db/schema';
import { readStoredTrials } from '$lib/server/decisions/read-stored-trials';
import { storeUpload } from '$lib/server/intake/store-upload';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { createPuckProtocol } from '../support/puck-protocol';
import { hourMs, plantRunningStudy, type RunningStudy } from '../support/running-study';

/** Real reaching data (MIT licence); expected values computed with R 4.2.2, see its PROVENANCE.md. */
const folder = new URL('../data/reach_clamp/', import.meta.url);
const expected = JSON.parse(readFileSync(new URL('expected.json', folder), 'utf8')) as {
	import: {
		rows: number;
		sum_hand_angle_deg: number;
		rows_with_any_missing_execution_variable: number;
	};
	ellipsoids: Record<
		string,
		{ baseline_block2: { all3: Ellipsoid; pair_angle_distance: Ellipsoid } }
	>;
};
type Ellipsoid = {
	n: number;
	mean: Record<string, number>;
	covariance_n_minus_1: number[][];
	eigenvalues: number[];
	f_scale_prediction_95?: number;
	f_scale_mean_95?: number;
};
const blockTrials = [40, 40, 280, 280, 280, 40, 40, 40];
const start = Date.parse('2027-03-08T09:00:00Z');
const clock = { now: () => start + 2 * hourMs };

function createReachProtocol(): ProtocolContent {
	const variable = (name: string, unit: string, min: number, max: number, scale: number) => ({
		name,
		unit,
		min,
		max,
		origin: (min + max) / 2,
		scale,
		resolution: 0
	});
	return {
		...createPuckProtocol(),
		task: {
			type: 'formula',
			formula: 'hand_angle_deg',
			tolerance: 5,
			resultUnit: 'deg',
			variables: [
				variable('hand_angle_deg', 'deg', -180, 180, 4),
				variable('peak_radial_velocity_mm_s', 'mm/s', 0, 3000, 140),
				variable('max_radial_distance_mm', 'mm', 0, 300, 20)
			]
		} as ProtocolContent['task'],
		visits: [
			{
				number: 1,
				label: 'Visit',
				kind: 'baseline',
				minutes: 60,
				setupMinutes: 0,
				cleanupMinutes: 0,
				gapBefore: null,
				blocks: blockTrials.map((trials, index) => ({
					number: index + 1,
					purpose: 'baseline' as const,
					trials
				}))
			}
		]
	};
}

let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let study: RunningStudy;

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	study = await plantRunningStudy(owner.db, createReachProtocol(), start);
	for (let number = 1; number <= 32; number += 1) {
		const { id } = await study.enrol(`B${String(number).padStart(2, '0')}`);
		await study.book(id, 1, start - number * 2 * hourMs, 60);
	}
});
afterAll(async () => {
	await Promise.all([owner.end(), app.end()]);
	await database.drop();
});

const bytes = readFileSync(new URL('reach_clamp_e2.csv', folder));

async function readBlock2(code: string) {
	const [row] = await owner.db
		.select({ id: block.id })
		.from(block)
		.innerJoin(participant, eq(participant.id, block.participantId))
		.where(sql`${participant.code} = ${code} and ${block.blockNumber} = 2`);
	return readStoredTrials(owner.db, row?.id ?? '');
}

describe('33,280 rows of real reaching data', () => {
	it('are stored whole, without the arm column', async () => {
		const stored = await storeUpload(app.db, clock, study.grant('trials:upload'), {
			name: 'reach_clamp_e2.csv',
			bytes
		});
		expect(stored).toMatchObject({
			ok: true,
			trialCount: expected.import.rows,
			blockCount: 32 * 8
		});
		const warnings = stored.ok ? stored.warnings.map((warning) => warning.code) : [];
		expect(warnings).toContain('arm-column-ignored');
		const [kept] = await owner.db.select({ content: upload.content }).from(upload);
		expect(new TextDecoder().decode(kept?.content)).not.toMatch(/big_target|small_target/);
	});

	it('keep their blanks and sums', async () => {
		const [row] = await owner.db.execute<{ angle: number; blanks: string }>(
			sql`select sum(execution[1]) as angle, count(*) filter (where array_position(execution, null) is not null) as blanks from trial`
		);
		expect(row?.angle).toBeCloseTo(expected.import.sum_hand_angle_deg, 2);
		expect(Number(row?.blanks)).toBe(expected.import.rows_with_any_missing_execution_variable);
	});

	it.each(Object.keys(expected.ellipsoids))('give R’s ellipsoids for %s', async (code) => {
		const { all3, pair_angle_distance: pair } = expected.ellipsoids[code]?.baseline_block2 ?? {};
		if (!all3 || !pair) throw new Error('no expected values');
		const whole = (await readBlock2(code)).filter((trial): trial is number[] =>
			trial.every((value) => value !== null)
		);
		expectEllipsoid(whole, all3);
		expectEllipsoid(
			whole.map((trial) => [trial[0] ?? NaN, trial[2] ?? NaN]),
			pair
		);
	});
});

/** 1e-8 relative, as the expected file states for closed forms; it holds 12 digits. */
function expectEllipsoid(trials: number[][], ellipsoid: Ellipsoid): void {
	expect(trials.length).toBe(ellipsoid.n);
	const close = (got: number, want: number) =>
		expect(Math.abs(got - want)).toBeLessThanOrEqual(1e-8 * Math.max(1, Math.abs(want)));
	computeMeanVector(trials).forEach((value, index) =>
		close(value, Object.values(ellipsoid.mean)[index] ?? NaN)
	);
	const covariance = computeCovariance(trials);
	covariance
		.flat()
		.forEach((value, index) => close(value, ellipsoid.covariance_n_minus_1.flat()[index] ?? NaN));
	const { values } = computeSymmetricEigen(covariance);
	[...values]
		.reverse()
		.forEach((value, index) => close(value, ellipsoid.eigenvalues[index] ?? NaN));
	const request = {
		trialCount: trials.length,
		variableCount: covariance.length,
		probability: 0.95
	};
	if (ellipsoid.f_scale_prediction_95)
		close(computeNextTrialFactor(request), ellipsoid.f_scale_prediction_95);
	if (ellipsoid.f_scale_mean_95) close(computeMeanFactor(request), ellipsoid.f_scale_mean_95);
}
