import { describe, expect, it } from 'vitest';
import { createTask } from '$scheduler/tasks/create-task';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import { exampleFormula, getDefaultTask } from './default-tasks';
import {
	createTaskDraft,
	readTaskDraft,
	taskDraftSchema,
	writeTaskDraft,
	type TaskDraft
} from './task-draft';
import { taskTypes } from './task-models';

const models = taskTypes.filter((type) => type !== 'formula');

function faultsOf(draft: TaskDraft) {
	const reading = readTaskDraft(draft);
	return reading.ok ? [] : reading.faults.map(({ field, code }) => [field, code]);
}

function changed(type: (typeof models)[number], change: (draft: TaskDraft) => void): TaskDraft {
	const draft = createTaskDraft(type);
	change(draft);
	return draft;
}

describe('draft of a task', () => {
	it('knows every model of the engine', () => {
		const known = taskRecordSchema.options.map(({ shape }) => shape.type.value);
		expect([...taskTypes].sort()).toEqual([...known].sort());
	});

	it.each(models)('%s comes back as it went in', (type) => {
		const record = getDefaultTask(type);
		const draft = writeTaskDraft(record);
		expect(taskDraftSchema.parse(draft)).toEqual(draft);
		expect(readTaskDraft(draft)).toEqual({ ok: true, record });
	});

	it.each(models)('%s survives as JSON', (type) => {
		const draft: unknown = JSON.parse(JSON.stringify(createTaskDraft(type)));
		expect(readTaskDraft(taskDraftSchema.parse(draft)).ok).toBe(true);
	});

	it.each(models)('%s names each number that is missing, at its field', (type) => {
		const whole = createTaskDraft(type);
		const optional = new Set(['relaxationTime', 'window']);
		for (const key of Object.keys(whole.numbers)) {
			const draft = { ...whole, numbers: { ...whole.numbers, [key]: null } };
			expect(faultsOf(draft)).toEqual(
				optional.has(key) ? [] : [[`numbers.${key}`, 'number-missing']]
			);
		}
	});

	it('holds every constant of the tethered ball', () => {
		const { numbers, choices } = createTaskDraft('tethered-ball');
		expect(numbers).toMatchObject({ k: 1.2, m: 0.12, relaxationTime: 18, arm: 0.38, window: null });
		expect(numbers).toMatchObject({ targetX: 0.3, targetY: 1.1, pivotX: 0, pivotY: -1.45 });
		expect(choices).toEqual({ postHit: 'penalty' });
	});

	it('keeps the formula and its variables', () => {
		expect(readTaskDraft(writeTaskDraft(exampleFormula))).toEqual({
			...{ ok: true, record: exampleFormula }
		});
		const miss = createTask(exampleFormula).evaluate([20 * Math.SQRT2, 45]);
		expect(miss).toBeCloseTo(0, 12);
	});

	it('gives the character at which a formula cannot be read', () => {
		const draft = { ...writeTaskDraft(exampleFormula), formula: 'extent * (direction' };
		const reading = readTaskDraft(draft);
		expect(reading.ok ? [] : reading.faults).toMatchObject([
			{ field: 'formula', code: 'formula-invalid', position: 19 }
		]);
	});

	it('starts a formula empty and says all that is missing', () => {
		const fields = faultsOf(createTaskDraft('formula')).map(([field]) => field);
		expect(fields).toEqual([
			'tolerance',
			'variables.0.name',
			'variables.0.min',
			'variables.0.max',
			'variables.0.origin',
			'variables.0.scale',
			'formula'
		]);
	});

	it('keeps the weight with its variable', () => {
		const draft = changed('linear', ({ variables }) => {
			variables.splice(0, 1);
			if (variables[0]) variables[0].weight = -2;
		});
		const reading = readTaskDraft(draft);
		expect(reading.ok && reading.record).toMatchObject({ coef: [-2, 1] });
		const open = changed('linear', ({ variables }) => {
			if (variables[1]) variables[1].weight = null;
		});
		expect(faultsOf(open)).toEqual([['variables.1.weight', 'number-missing']]);
	});

	it('writes the unit of the cart’s measure', () => {
		const draft = changed('cart-pendulum', ({ choices }) => {
			choices.measure = 'predictability';
		});
		const reading = readTaskDraft(draft);
		expect(reading.ok && reading.record.resultUnit).toBe('bit');
	});

	it('needs no height of the meeting where that is a variable', () => {
		const draft = changed('paddle-bounce', ({ numbers, variables }) => {
			numbers.impactHeight = null;
			const height = { name: 'height_m', unit: 'm', min: -0.1, max: 0.2, origin: 0 };
			variables.push({ ...height, scale: 0.02, resolution: null, weight: null });
		});
		expect(faultsOf(draft)).toEqual([]);
	});

	it('says which constants do not go together, at a field of the form', () => {
		const penalty = changed('tethered-ball', ({ numbers }) => {
			numbers.postPenalty = 0.04;
		});
		expect(faultsOf(penalty)).toEqual([['numbers.postPenalty', 'not-together']]);
		const low = changed('paddle-bounce', ({ numbers }) => {
			numbers.targetHeight = -1;
		});
		expect(faultsOf(low)).toEqual([['numbers.targetHeight', 'not-together']]);
	});

	it.each([
		['min', { min: 5 }, 'variables.0.min', 'range-empty'],
		['origin', { origin: 9 }, 'variables.0.origin', 'origin-outside'],
		['scale', { scale: 0 }, 'variables.0.scale', 'scale-missing'],
		['resolution', { resolution: -1 }, 'variables.0.resolution', 'resolution-negative'],
		['name', { name: 'release speed' }, 'variables.0.name', 'name-unreadable']
	])('finds a wrong %s of a variable', (_, change, field, code) => {
		const draft = changed('puck', ({ variables }) => {
			Object.assign(variables[0] ?? {}, change);
		});
		expect(faultsOf(draft)).toEqual([[field, code]]);
	});
});
