import { describe, expect, it } from 'vitest';
import { createPatternDraft } from '$lib/protocol/patterns';
import { readContent } from '$lib/protocol/read-content';
import { currentVersions, hashPolicy } from '$lib/server/decisions/versions';
import { decideNextBlock } from '$scheduler/policies/decide';
import {
	ruleExperimentSchema,
	type RuleOutcome
} from '$scheduler/design/workbench/rule-experiment';
import { hashRule } from './hash-rule';
import { keepOutcomes, loadOutcomes } from './kept-outcomes';

function patternContent() {
	const read = readContent(createPatternDraft('yoked-region'));
	if (!read.ok) throw new Error('the pattern opens valid');
	return read.content;
}

describe('the hash of a rule', () => {
	it('is the same in the simulation, on the server and in the log of decisions', async () => {
		const content = patternContent();
		const onServer = hashPolicy(content);
		expect(await hashRule(content)).toBe(onServer);
		const logged = decideNextBlock({
			...{
				state: { day: 1, blockInDay: 0 },
				protocol: content.policy,
				task: content.task as never
			},
			versions: currentVersions(onServer),
			digest: () => 'digest'
		});
		expect(logged.policyHash).toBe(await hashRule(content));
	});

	it('is another when a setting of the rule is another', async () => {
		const content = patternContent();
		const moved = { ...content, policy: { ...content.policy, hysteresis: 0.75 } };
		expect(await hashRule(moved)).not.toBe(await hashRule(content));
	});
});

describe('outcomes that are kept', () => {
	const experiment = ruleExperimentSchema.parse({
		...{
			task: patternContent().task,
			policy: {},
			sweep: 'band-quantile',
			values: [0.9],
			people: 2
		},
		...{ kind: 'exploring', lagOne: 0, days: 2, blocksPerDay: 2, gapHours: 23, seed: 1 }
	});
	const outcome: RuleOutcome = {
		...{ value: 0.9, person: 0, steady: { blocks: 5, changed: 0 }, unmoved: null },
		...{ escapeTrials: 120, followTrials: null, decisions: 4, holds: 0 }
	};

	it('come back for the same experiment with more people, and for no other', async () => {
		const store = fakeStore();
		await keepOutcomes(store, experiment, [outcome]);
		expect(await loadOutcomes(store, { ...experiment, people: 40, values: [0.9, 0.99] })).toEqual([
			outcome
		]);
		expect(await loadOutcomes(store, { ...experiment, seed: 2 })).toEqual([]);
	});

	it('are none when what was kept cannot be read, or nothing more fits', async () => {
		const store = fakeStore();
		await keepOutcomes(store, experiment, [outcome]);
		for (const key of store.keys()) store.setItem(key, '{"broken"');
		expect(await loadOutcomes(store, experiment)).toEqual([]);
		const full = {
			...fakeStore(),
			setItem: () => {
				throw new Error('full');
			}
		};
		await keepOutcomes(full, experiment, [outcome]);
		expect(await loadOutcomes(full, experiment)).toEqual([]);
	});

	it('make room for newer experiments', async () => {
		const store = fakeStore();
		for (let seed = 0; seed < 12; seed++)
			await keepOutcomes(store, { ...experiment, seed }, [outcome]);
		expect(store.keys()).toHaveLength(6);
	});
});

function fakeStore() {
	const kept = new Map<string, string>();
	return {
		getItem: (key: string) => kept.get(key) ?? null,
		setItem: (key: string, value: string) => void kept.set(key, value),
		removeItem: (key: string) => void kept.delete(key),
		key: (index: number) => [...kept.keys()][index] ?? null,
		get length() {
			return kept.size;
		},
		keys: () => [...kept.keys()]
	};
}
