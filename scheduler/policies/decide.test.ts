import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { canonicalJson } from './canonical-json.ts';
import { decideNextBlock } from './decide.ts';
import type { DecisionInputsInput } from './decision-record.ts';
import { explainRecord } from './explain.ts';
import { PUCK_RECORD, spreadAlongManifold } from './planted-trials.test-data.ts';
import { replayDecision, type Replay } from './replay-decision.ts';

const digest = (text: string) => createHash('sha256').update(text).digest('hex');
const versions = { engineVersion: '1.0.0', runtimeVersion: 'node 20' };
const ONE_BLOCK_SETTLES = {
	aims: { region: { share: 1, escapes: 3 } },
	settle: { minBlocks: 1, maxBlocks: 1 }
};

function givenBaseline(): DecisionInputsInput {
	return {
		task: PUCK_RECORD,
		protocol: ONE_BLOCK_SETTLES,
		state: {
			day: 1,
			blockInDay: 1,
			trialsToday: 60,
			last: { kind: 'baseline', trials: spreadAlongManifold(60) }
		}
	};
}

function decide(inputs = givenBaseline()) {
	return decideNextBlock({ ...inputs, versions, digest });
}

/** Replays the stored record against changed sources. */
function replayAfter(change: (inputs: ReturnType<typeof decide>['inputs']) => void): Replay {
	const stored = decide();
	const inputs = structuredClone(stored.inputs);
	change(inputs);
	return replayDecision({ stored, inputs, versions, digest });
}

describe('decideNextBlock', () => {
	it('gives a region with what it expects of it', () => {
		const record = decide();
		expect(record.kind).toBe('region');
		expect(record.prediction).toMatchObject({ about: 'region', catchShare: 0.8 });
		expect(record.inputs.protocol.place.leakMin).toBe(0.1);
	});

	it('gives the same bytes each time', () => {
		expect(canonicalJson(decide())).toBe(canonicalJson(decide()));
	});

	it('survives being stored as JSON', () => {
		const record = decide();
		expect(canonicalJson(JSON.parse(JSON.stringify(record)))).toBe(canonicalJson(record));
	});

	it('leaves its inputs as they were', () => {
		const inputs = givenBaseline();
		const before = canonicalJson(inputs);
		decide(inputs);
		expect(canonicalJson(inputs)).toBe(before);
	});

	it('answers for a fixed arm in the same form', () => {
		const fixed = decide({
			...givenBaseline(),
			rule: { kind: 'fixed', block: { kind: 'practice' } }
		});
		expect(Object.keys(fixed).sort()).toEqual(Object.keys(decide()).sort());
		expect([fixed.kind, fixed.parameters.trials]).toEqual(['practice', 60]);
		expect(fixed.reasons[0]?.code).toBe('PROTOCOL-BLOCK');
	});

	it('stops a fixed arm at the same limits', () => {
		const inputs = givenBaseline();
		const tired = { ...inputs, state: { ...inputs.state, readiness: { pain: 5 } } };
		const fixed = decide({ ...tired, rule: { kind: 'fixed', block: { kind: 'practice' } } });
		expect([fixed.kind, fixed.reasons[0]?.code]).toEqual(['stop', 'PAIN']);
	});

	it('explains every rung, share and reason in sentences', () => {
		const { reasons, ladder, shares } = explainRecord(decide());
		const texts = [...reasons, ...ladder, ...shares].map(({ text }) => text);
		expect(texts.every((text) => /^[A-Z0-9].*[.]$/.test(text))).toBe(true);
		expect(texts.join(' ')).not.toMatch(/unknown number|undefined|NaN|engine answered/);
	});

	it('names the path of a bad input', () => {
		const bad = { ...givenBaseline(), protocol: { place: { leakMin: 2 } } };
		expect(() => decide(bad)).toThrow(/leakMin/);
	});

	it('refuses a trial of another task by its number', () => {
		const inputs = givenBaseline();
		const last = { kind: 'baseline' as const, trials: [[2.4, 0.2], [2.4]] };
		expect(() => decide({ ...inputs, state: { ...inputs.state, last } })).toThrow(/trial 2 has 1/);
	});
});

describe('replayDecision', () => {
	it('finds nothing when nothing was changed', () => {
		expect(replayAfter(() => undefined)).toEqual({ equal: true, sameVersions: true });
	});

	it('names an altered trial', () => {
		const replay = replayAfter(({ state }) => {
			const trial = state.last?.trials[17];
			if (trial) trial[0] = 2.6;
		});
		expect(replay).toMatchObject({
			...{ equal: false, cause: 'input-changed', name: 'trial 18, release_speed' },
			...{ path: 'inputs.state.last.trials[17][0]', recomputed: 2.6 }
		});
	});

	it('names an altered policy number and what it would have changed', () => {
		const replay = replayAfter(({ protocol }) => (protocol.place.leakMin = 0.3));
		expect(replay).toMatchObject({
			...{ cause: 'input-changed', name: 'policy setting place.leakMin' },
			...{ stored: 0.1, recomputed: 0.3, answer: { path: expect.any(String) } }
		});
	});

	it('names an altered memory field that does not change the answer as such', () => {
		const replay = replayAfter(({ state }) => (state.memory.driftRun = 1));
		expect(replay).toMatchObject({ cause: 'input-changed', name: 'memory driftRun', answer: null });
	});

	it('names an altered answer', () => {
		const stored = decide();
		const altered = { ...stored, parameters: { ...stored.parameters, trials: 90 } };
		const replay = replayDecision({ stored: altered, inputs: stored.inputs, versions, digest });
		expect(replay).toMatchObject({
			cause: 'answer-differs',
			path: 'parameters.trials',
			stored: 90
		});
	});

	it('says when the stored copy of the inputs was altered', () => {
		const stored = decide();
		const copy = structuredClone(stored);
		copy.inputs.state.day = 2;
		const replay = replayDecision({ stored: copy, inputs: stored.inputs, versions, digest });
		expect(replay).toMatchObject({ cause: 'record-altered', name: 'state day' });
	});

	it('says on another runtime that only the runtime differs', () => {
		const stored = decide();
		const shifted = structuredClone(stored);
		const { region } = shifted.parameters;
		if (region?.k) region.k += 1e-12;
		const other = { ...versions, runtimeVersion: 'node 22' };
		const replay = replayDecision({
			...{ stored: shifted, inputs: stored.inputs, versions: other, digest }
		});
		expect(replay).toMatchObject({ cause: 'other-version', withinTolerance: true });
	});
});
