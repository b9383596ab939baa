import { describe, expect, it } from 'vitest';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { taskRecordSchema } from '../tasks/task-record.ts';
import { describeEscapeCourse } from './escape-course.ts';
import { drawNormalPoints } from './normal-points.test-data.ts';

/** Two forces that must add to 20: the solutions are a straight line. */
const task = createScaledTask(
	createTask(
		taskRecordSchema.parse({
			...{ type: 'linear', coef: [1, 1], target: 20, tolerance: 1, resultUnit: 'N' },
			variables: ['a', 'b'].map((name) => ({
				...{ name, unit: 'N', min: 0, max: 20, origin: 10, scale: 1 }
			}))
		})
	)
);
const region = {
	center: [0, 0],
	shape: [
		[1, 0],
		[0, 1]
	],
	...{ share: 0.8, stay: 0.1 }
};
/** Trials about a place on the solutions, `s` from the center of the region. */
const trialsAt = (s: number, count: number) =>
	drawNormalPoints(count, 2).map(([a = 0, b = 0]) => [
		s / Math.SQRT2 + 0.3 * a,
		-s / Math.SQRT2 + 0.3 * b
	]);

describe('describeEscapeCourse', () => {
	it('tells a person who moved out, how far and to which side', () => {
		const executions = [...trialsAt(0, 40), ...trialsAt(1.5, 40), ...trialsAt(3, 40)];
		const course = describeEscapeCourse({
			task,
			region,
			executions,
			afterRemoval: trialsAt(3, 40)
		});
		if (!course.ok) throw new Error(course.reason);
		expect(course.outside.share).toBeGreaterThan(0.55);
		expect(course.relative).toBeGreaterThan(0.5);
		// Equal clouds: half the distance in SD, 3 / .3 / 2.
		expect(course.touchingScale).toBeGreaterThan(4);
		expect(course.touchingScale).toBeLessThan(6);
		expect(course.overlap).toBeLessThan(0.01);
		expect(Math.abs(course.travel ?? 0)).toBeGreaterThan(2.85);
		expect(Math.abs(course.travel ?? 0)).toBeLessThan(3.15);
		const back = describeEscapeCourse({
			...{ task, region },
			executions: [...trialsAt(0, 40), ...trialsAt(-1.5, 40), ...trialsAt(-3, 40)]
		});
		expect(back.ok && back.side).toBe(-course.side);
		expect(course.reentry?.share).toBe(0);
	});

	it('tells a person who stayed', () => {
		const course = describeEscapeCourse({ task, region, executions: trialsAt(0, 120) });
		if (!course.ok) throw new Error(course.reason);
		expect(course.outside.share).toBeLessThan(0.05);
		expect(course.overlap).toBeGreaterThan(0.9);
		expect(Math.abs(course.travel ?? 9)).toBeLessThan(0.15);
		expect(course.reentry).toBeNull();
	});

	it('says when there are too few trials or no cloud', () => {
		expect(describeEscapeCourse({ task, region, executions: trialsAt(0, 9) })).toEqual({
			...{ ok: false, reason: 'too-few-trials' }
		});
		const same = Array.from({ length: 30 }, () => [1, 1]);
		expect(describeEscapeCourse({ task, region, executions: same })).toEqual({
			...{ ok: false, reason: 'singular-cloud' }
		});
	});
});
