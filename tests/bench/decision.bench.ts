import { createHash } from 'node:crypto';
import { bench, describe } from 'vitest';
import { decideNextBlock } from '../../scheduler/policies/decide.ts';
import type { DecisionInputsInput } from '../../scheduler/policies/decision-record.ts';
import { createScaledTask } from '../../scheduler/tasks/scaled-task.ts';
import { createTask } from '../../scheduler/tasks/create-task.ts';
import { taskRecordSchema } from '../../scheduler/tasks/task-record.ts';
import { computeNormalPoints } from '../../scheduler/statistics/r-sequence.ts';
import { COURSE_TASK } from '../../scheduler/simulation/course-groups.ts';

const COUNTS = [60, 500, 5000];
const digest = (text: string) => createHash('sha256').update(text).digest('hex');
const versions = { engineVersion: 'bench', runtimeVersion: 'node' };
const task = taskRecordSchema.parse(COURSE_TASK);

/** Trials along the solutions, in task units. */
function spreadTrials(count: number, across: number): number[][] {
	const scaled = createScaledTask(createTask(task));
	const [g1 = 0, g2 = 1] = scaled.gradient([0, 0]);
	const length = Math.hypot(g1, g2);
	return computeNormalPoints(count, 2).map(([a = 0, b = 0]) =>
		scaled.toUnits([(-a * g2 + across * b * g1) / length, (a * g1 + across * b * g2) / length])
	);
}

/** A first block after which the whole ladder is asked: gates, settling, placement at every share. */
function giveInputs(count: number, across: number): DecisionInputsInput {
	return {
		task,
		protocol: {
			settle: { minBlocks: 1, maxBlocks: 1 },
			limits: { trialsPerDay: 2000 },
			aims: { region: { share: 1, escapes: 3 } }
		},
		state: {
			...{ day: 1, blockInDay: 1 },
			last: { kind: 'baseline', trials: spreadTrials(count, across) }
		}
	};
}

describe('a full decision with a region at the first share, record and digest included', () => {
	for (const count of COUNTS) {
		const inputs = giveInputs(count, 0.35);
		bench(`${count} trials`, () => void decideNextBlock({ ...inputs, versions, digest }));
	}
});

describe('a full decision in which every share and every lean is refused', () => {
	for (const count of COUNTS) {
		const inputs = giveInputs(count, 1.6);
		bench(`${count} trials`, () => void decideNextBlock({ ...inputs, versions, digest }), {
			...{ iterations: 3, time: 500 }
		});
	}
});

describe('a full decision among two free directions', () => {
	const variables = ['a', 'b', 'c'].map((name) => ({
		...{ name, unit: 'N', min: 0, max: 20, origin: 10, scale: 1 }
	}));
	const inputs: DecisionInputsInput = {
		...giveInputs(60, 0.35),
		task: {
			...{ type: 'linear', coef: [1, 1, 1], target: 30, tolerance: 1, resultUnit: 'N', variables }
		},
		state: {
			...{ day: 1, blockInDay: 1 },
			last: {
				kind: 'baseline',
				trials: computeNormalPoints(60, 3).map((z) => z.map((value) => 10 + 0.55 * value))
			}
		}
	};
	bench('60 trials', () => void decideNextBlock({ ...inputs, versions, digest }), {
		...{ iterations: 3, time: 500 }
	});
});
