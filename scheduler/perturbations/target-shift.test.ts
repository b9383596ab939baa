import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeNormalPoints } from '../statistics/r-sequence.ts';
import { shiftRuleSchema, type ShiftRule } from './shift-rule.ts';
import { TargetShift } from './target-shift.ts';

const rule = (more: object = {}): ShiftRule =>
	shiftRuleSchema.parse({ sigma: 1, goal: 3, ...more });
const NOISE = computeNormalPoints(400, 1).map(([z = 0]) => z);

/** Runs a learner that corrects a share of each error; returns the levels shown. */
function run(
	shift: TargetShift,
	options: { rate: number; trials: number; block?: number }
): number[] {
	let adapted = 0;
	return NOISE.slice(0, options.trials).map((noise, i) => {
		const { level } = shift;
		const error = level - adapted - 0.3 * noise;
		const isLastOfBlock = (i + 1) % (options.block ?? 60) === 0;
		shift.observe({ error, hit: Math.abs(error) < 1, leftToday: null, isLastOfBlock });
		adapted += options.rate * error;
		return level;
	});
}

describe('TargetShift', () => {
	it('leaves the target in its place for the first eight trials', () => {
		const levels = run(new TargetShift(rule()), { rate: 0.2, trials: 9 });
		expect(levels).toEqual([...new Array(8).fill(0), 1]);
	});

	it('goes to the goal with a learner that follows', () => {
		const shift = new TargetShift(rule());
		run(shift, { rate: 0.2, trials: 200 });
		expect(shift.dump()).toMatchObject({ status: 'done', theta: 3, passed: 3 });
	});

	it('goes the other way for a negative goal', () => {
		const shift = new TargetShift(rule({ goal: -2 }));
		run(shift, { rate: 0.2, trials: 200 });
		expect(shift.dump()).toMatchObject({ status: 'done', theta: -2, passed: -2 });
	});

	it('goes back halfway and then stays at what was followed for a person who does not follow', () => {
		const shift = new TargetShift(rule());
		const levels = run(shift, { rate: 0, trials: 120 });
		expect(shift.dump()).toMatchObject({ status: 'frozen', theta: 0, passed: 0, stalls: 2 });
		expect(shift.log.map(({ action }) => action)).toEqual(['advance', 'retreat', 'freeze']);
		expect([...new Set(levels)]).toEqual([0, 1, 0.5]);
	});

	it('takes no step when too few trials are left in the day', () => {
		const shift = new TargetShift(rule());
		for (let i = 0; i < 20; i++)
			shift.observe({ error: 0, hit: true, leftToday: 11, isLastOfBlock: false });
		expect(shift.level).toBe(0);
	});

	it('keeps the level within a block when the rig cannot change it', () => {
		const levels = run(new TargetShift(rule({ granularity: 'block' })), { rate: 0.2, trials: 180 });
		// The start counts after eight trials; from then on each block ends with one look.
		for (const start of [60, 120]) expect(new Set(levels.slice(start, start + 60)).size).toBe(1);
	});

	it('starts again after a gap at the share that is kept, and never passes more than that', () => {
		const shift = new TargetShift(rule());
		run(shift, { rate: 0.2, trials: 60 });
		const { theta } = shift.dump();
		shift.resume(0.5);
		const after = shift.dump();
		expect(after).toMatchObject({ theta: theta / 2, hold: 0, errors: [] });
		expect(Math.abs(after.passed)).toBeLessThanOrEqual(theta / 2);
	});

	it('goes on from a stored state as if it had not been stored', () => {
		fc.assert(
			fc.property(fc.integer({ min: 1, max: 119 }), (cut) => {
				const whole = new TargetShift(rule());
				let parts = new TargetShift(rule());
				NOISE.slice(0, 120).forEach((noise, i) => {
					if (i === cut) parts = new TargetShift(rule(), JSON.parse(JSON.stringify(parts.dump())));
					const trial = {
						error: 0.2 + noise / 2,
						hit: true,
						leftToday: null,
						isLastOfBlock: false
					};
					whole.observe(trial);
					parts.observe(trial);
					expect(parts.level).toBe(whole.level);
				});
			})
		);
	});

	it('never steps farther than its cap and never beyond the goal', () => {
		const errors = fc.array(fc.double({ min: -4, max: 4, noNaN: true }), { maxLength: 150 });
		fc.assert(
			fc.property(errors, (list) => {
				const shift = new TargetShift(rule());
				for (const error of list) {
					const before = shift.level;
					shift.observe({ error, hit: Math.abs(error) < 1, leftToday: null, isLastOfBlock: false });
					expect(shift.level - before).toBeLessThanOrEqual(1 + 1e-12);
					expect(shift.level >= 0 && shift.level <= 3).toBe(true);
				}
			})
		);
	});
});
