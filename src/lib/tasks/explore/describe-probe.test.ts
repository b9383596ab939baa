import { describe, expect, it } from 'vitest';
import { exampleFormula, getDefaultTask } from '../default-tasks';
import { taskTypes } from '../task-models';
import { describeProbe } from './describe-probe';
import { moveProbe, stepOf } from './probe-steps';
import { drawScene } from './scenes/draw-scene';
import type { Point } from '$lib/charts/cloud-data';
import type { SceneShape } from './scenes/scene';

const records = taskTypes.map((type) =>
	type === 'formula' ? exampleFormula : getDefaultTask(type)
);
const origin = (record: (typeof records)[number]) => record.variables.map((one) => one.origin);

function placesOf(shape: SceneShape): readonly Point[] {
	return shape.kind === 'line' || shape.kind === 'area' ? shape.points : [shape.at];
}

describe.each(records.map((record) => [record.type, record] as const))('%s', (_, record) => {
	it('says what happens at the probe and what changes it', () => {
		const words = describeProbe(record, origin(record));
		expect(words.outcome).toMatch(/[.!]$/);
		expect(words.outcome).not.toMatch(/NaN|undefined|Infinity/);
		expect(words.slopes.match(/ more: /g)?.length).toBe(record.variables.length);
	});

	it('is drawn in its room without a place that is no number', () => {
		for (const x of [origin(record), record.variables.map(({ min }) => min)]) {
			const scene = drawScene(record, x);
			const all = scene.shapes.flatMap(placesOf).flat();
			expect(all.length).toBeGreaterThan(4);
			expect(all.every(Number.isFinite)).toBe(true);
			expect(scene.bounds.x[0]).toBeLessThan(scene.bounds.x[1]);
		}
	});

	it('moves the probe by round steps that stay inside the range', () => {
		record.variables.forEach((variable, axis) => {
			const moved = moveProbe(record, origin(record), axis, 1);
			const change = (moved[axis] ?? NaN) - variable.origin;
			expect(change).toBeGreaterThan(0);
			expect(change).toBeLessThanOrEqual(1.5 * stepOf(variable) + 1e-12);
			const far = moveProbe(record, origin(record), axis, 1e9);
			expect(far[axis]).toBe(variable.max);
		});
	});
});

describe('words of one execution', () => {
	it('tell the tethered ball’s side, time and room at the post', () => {
		const { outcome, label } = describeProbe(getDefaultTask('tethered-ball'), [-28, 3]);
		expect(outcome).toBe(
			'Passes 5.6 cm to the right of the target after 0.57 s, clear of the post by 32 cm.'
		);
		expect(label).toBe('−5.6 cm');
	});

	it('tell a ball on the post with what it counts as', () => {
		const { outcome } = describeProbe(getDefaultTask('tethered-ball'), [90, 0.3]);
		expect(outcome).toBe('The ball swings into the post and counts as a miss of 50.0 cm.');
	});

	it('tell a push that friction holds', () => {
		const words = describeProbe(getDefaultTask('puck-push'), [0.9, 0.2]);
		expect(words.outcome).toContain('too weak');
		expect(words.label).toBe('no result');
	});

	it('tell a hit', () => {
		expect(describeProbe(getDefaultTask('two-finger'), [5, 5]).isHit).toBe(true);
		expect(describeProbe(getDefaultTask('two-finger'), [5, 7]).isHit).toBe(false);
	});
});
