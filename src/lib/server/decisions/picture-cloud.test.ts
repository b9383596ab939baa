import { describe, expect, it } from 'vitest';
import { drawNormal } from '$scheduler/random/random-stream';
import { createSeededStream } from '$scheduler/random/seeded-stream';
import { decideNextBlock } from '$scheduler/policies/decide';
import type { DecisionRecord } from '$scheduler/policies/decision-record';
import { createEmptyMemory } from '$scheduler/policies/policy-memory';
import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import { listPanels } from '$lib/charts/linked-projections';
import { sha256Hex } from '$lib/server/record/canonical-json';
import { pictureCloud } from './picture-cloud';

const threeForces = taskRecordSchema.parse({
	type: 'linear',
	coef: [1, 1, 1],
	target: 30,
	tolerance: 1,
	resultUnit: 'N',
	variables: ['thumb', 'index', 'middle'].map((name) => ({
		...{ name, unit: 'N', min: 0, max: 25, origin: 10, scale: 1 }
	}))
});
/** An arm of .31, .27 and .17 m; at 45°, 60° and 20° its fingertip lies on the target. */
const threeJoints = taskRecordSchema.parse({
	type: 'arm-endpoint',
	target: [0.0518, 0.6193],
	tolerance: 0.04
});

/** Plain blocks of one steady person until the engine places a region. */
function practiseToRegion(task: TaskRecord): DecisionRecord {
	const stream = createSeededStream(7, 0);
	let memory = createEmptyMemory();
	for (let block = 0; block < 10; block++) {
		const trials = Array.from({ length: 60 }, () =>
			task.variables.map(({ origin, scale }) => origin + 0.6 * scale * drawNormal(stream))
		);
		const record = decideNextBlock({
			task,
			protocol: { aims: { region: { share: 1, escapes: 2 } } },
			state: { day: 1, blockInDay: block, last: { kind: 'practice', trials }, memory },
			versions: { engineVersion: '1', runtimeVersion: 'node' },
			digest: sha256Hex
		});
		if (record.kind === 'region') return record;
		memory = record.memory;
	}
	throw new RangeError('no region was placed');
}

describe('the picture of a decision', () => {
	it.each([
		['three variables and one result', threeForces, /^The perfect trials form a surface in 3/],
		['three variables and two results', threeJoints, /^2 results .* form a line in 3/]
	])('of %s shows every pair with cloud, region and way out', (_, task, words) => {
		const picture = pictureCloud(practiseToRegion(task));
		if (picture.kind !== 'projections') throw new RangeError(`got ${picture.kind}`);
		expect(picture.note).toMatch(words);
		const panels = listPanels(picture.data);
		expect(panels).toHaveLength(3);
		for (const { ellipses, trials, x, y } of panels) {
			expect(ellipses.map(({ kind }) => kind)).toEqual(['own', 'region', 'expected']);
			expect(trials).toHaveLength(60);
			for (const { center } of ellipses) {
				expect(center[0]).toBeGreaterThan(x.domain[0]);
				expect(center[0]).toBeLessThan(x.domain[1]);
				expect(center[1]).toBeGreaterThan(y.domain[0]);
				expect(center[1]).toBeLessThan(y.domain[1]);
			}
		}
	});

	it('says why there is none', () => {
		const record = practiseToRegion(threeForces);
		const { last } = record.inputs.state;
		const show = (trials: number[][] | null) => {
			const state = { ...record.inputs.state, last: last && trials ? { ...last, trials } : null };
			return pictureCloud({ ...record, inputs: { ...record.inputs, state } });
		};
		expect(show(null)).toMatchObject({ kind: 'none', why: 'no block came before this decision' });
		expect(show([[1, 2, 3]])).toMatchObject({ why: '1 trials are too few for an ellipsoid' });
		const flat = Array.from({ length: 9 }, (_, i) => [i, 2 * i, i * i]);
		expect(show(flat)).toMatchObject({ why: 'the trials do not spread in every direction' });
	});
});
