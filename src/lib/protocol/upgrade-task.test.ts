import { describe, expect, it } from 'vitest';
import { getDefaultTask } from '../tasks/default-tasks';
import { createTaskDraft, writeTaskDraft } from '../tasks/task-draft';
import { taskModels, taskTypes } from '../tasks/task-models';
import { createPatternDraft } from './patterns';
import { protocolDraftSchema } from './protocol-draft';
import { contentOf } from './read-content.test-data';
import { readTask } from './read-task';
import { writeDraft } from './write-draft';

const variable = {
	...{ name: 'speed', unit: 'm/s', min: 0.5, max: 4, origin: 2.5, scale: 0.1, resolution: null }
};
const old = {
	puck: { mu: 0.2, g: 9.81, D: 3, tolerance: null, variables: [variable, variable] },
	formula: { formula: 'a + 1', resultUnit: 'cm', tolerance: 0.5, variables: [variable] }
};

function open(task: unknown) {
	return protocolDraftSchema.parse({ ...createPatternDraft('blank'), task }).task;
}

describe('a draft of the older form', () => {
	it('opens with its puck, gaps and all', () => {
		expect(open({ type: 'puck', ...old })).toEqual({
			...{ type: 'puck', numbers: { mu: 0.2, g: 9.81, D: 3 }, choices: {}, formula: '' },
			...{ resultUnit: 'm', tolerance: null },
			variables: [
				{ ...variable, weight: null },
				{ ...variable, weight: null }
			]
		});
	});

	it('opens with its formula', () => {
		expect(open({ type: 'formula', ...old })).toEqual({
			...{ type: 'formula', numbers: {}, choices: {}, formula: 'a + 1', resultUnit: 'cm' },
			...{ tolerance: 0.5, variables: [{ ...variable, weight: null }] }
		});
	});

	it('is none of the newer form', () => {
		const task = createTaskDraft('arm-endpoint');
		expect(open(task)).toEqual(task);
	});
});

describe('a version of any task', () => {
	it.each(taskTypes.filter((type) => type !== 'formula'))('%s opens as a draft', (type) => {
		const record = getDefaultTask(type);
		const draft = { ...createPatternDraft('blank'), task: writeTaskDraft(record) };
		expect(readTask(draft.task)).toEqual(record);
		const content = contentOf(draft);
		expect(writeDraft(content, createPatternDraft('blank')).task).toEqual(draft.task);
		expect(taskModels[type].label).not.toBe('');
	});
});
