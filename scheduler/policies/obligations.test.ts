import { describe, expect, it } from 'vitest';
import { chooseNextBlock } from './choose-next-block.ts';
import type { Decision } from './decision.ts';
import { PUCK_RECORD, spreadAlongManifold } from './planted-trials.test-data.ts';
import { policySettingsSchema, type PolicySettingsInput } from './policy-settings.ts';
import type { PolicyStateInput } from './policy-state.ts';

const trials = spreadAlongManifold(60);
const QUICK = { settle: { minBlocks: 1, maxBlocks: 1 }, place: { pointCount: 128 } };
const ONLY_SHIFT = { aims: { shift: { share: 1, goal: 1 } }, shift: { minPlain: 50 } };

/** Runs each decision as it was made; plain kinds with the same steady cloud. */
function play(
	protocol: PolicySettingsInput,
	states: Partial<PolicyStateInput>[],
	run: (decision: Decision) => PolicyStateInput['last'] = runAsPlanned
): string[][] {
	let decision: Decision | undefined;
	return states.map((state) => {
		decision = chooseNextBlock({
			state: {
				...{ day: 1, blockInDay: 0, ...state },
				...(decision ? { memory: decision.memory, last: run(decision) } : {})
			},
			protocol: { ...QUICK, ...protocol },
			task: PUCK_RECORD
		});
		return [decision.kind, decision.reasons[0]?.code ?? ''];
	});
}

function runAsPlanned({ kind, parameters }: Decision): PolicyStateInput['last'] {
	if (kind === 'shift') return { kind, errors: followLevel(parameters.rule?.sigma ?? 1) };
	return { kind: kind === 'hold' || kind === 'stop' || kind === 'wait' ? 'rest' : kind, trials };
}

/** A person who follows every level at once: errors only of the 8 unshifted trials' size. */
function followLevel(sigma: number): number[] {
	return Array.from({ length: 60 }, (_, i) => (i % 2 === 0 ? 0.1 : -0.1) * sigma);
}

const days = (counts: number[]) =>
	counts.flatMap((count, day) =>
		Array.from({ length: count }, (_, blockInDay) => ({
			...{ day: day + 1, blockInDay, blocksLeftToday: count - blockInDay },
			gapHours: blockInDay === 0 && day > 0 ? 24 : null
		}))
	);

describe('blocks that the protocol obliges', () => {
	it('come first on each day, in their order, and once', () => {
		const codes = play(
			{
				obligations: [
					{ kind: 'probe', when: { at: 'day-start' } },
					{ kind: 'clamp', when: { at: 'day-start', days: [2] } }
				]
			},
			days([2, 4])
		);
		expect(codes[0]).toEqual(['probe', 'PROBE-DECLARED']);
		expect(codes.slice(2, 4)).toEqual([
			['probe', 'PROBE-DECLARED'],
			['clamp', 'CLAMP-DUE']
		]);
		expect(codes.filter(([, code]) => code === 'PROBE-DECLARED')).toHaveLength(2);
		expect(codes.filter(([, code]) => code === 'CLAMP-DUE')).toHaveLength(1);
	});

	it('wait for the hours that the protocol asks for', () => {
		const when = { at: 'day-start', gapHoursMin: 30 } as const;
		const codes = play({ obligations: [{ kind: 'retention', when }] }, days([1, 2]));
		expect(codes.flat()).not.toContain('RETENTION-DUE');
	});

	it('end a day where they are to end it', () => {
		const obligations = [
			{ kind: 'transfer', when: { at: 'day-end' }, targetOffset: 0.3 },
			{ kind: 'clamp', when: { at: 'day-end' } }
		] as const;
		const codes = play({ obligations: [...obligations] }, days([4]));
		expect(codes.slice(-2)).toEqual([
			['transfer', 'TRANSFER-DUE'],
			['clamp', 'CLAMP-DUE']
		]);
		expect(codes[1]?.[1]).not.toBe('TRANSFER-DUE');
	});

	it('come after a shift before its washout where they measure what is left of it', () => {
		const codes = play(
			{
				...ONLY_SHIFT,
				obligations: [{ kind: 'clamp', when: { at: 'after', ended: 'shift' } }]
			},
			days([6])
		).map(([, code]) => code);
		const clamp = codes.indexOf('CLAMP-DUE');
		expect(clamp).toBeGreaterThan(0);
		expect(codes[clamp + 1]).toBe('WASHOUT-DUE');
	});

	it('come again after so many perturbed blocks', () => {
		const codes = play(
			{
				aims: { region: { share: 1, escapes: 9 } },
				region: { maxBlocks: 9 },
				obligations: [{ kind: 'clamp', when: { at: 'every', perturbedBlocks: 2 } }]
			},
			days([9]),
			(decision) =>
				decision.kind === 'region'
					? { kind: 'region', trials: spreadAlongManifold(60, { along: 1.6, across: 0.35 }) }
					: runAsPlanned(decision)
		).map(([kind]) => kind);
		const first = codes.indexOf('clamp');
		expect(codes.slice(first - 2, first)).toEqual(['region', 'region']);
	});

	it('say what is shown, how long they are and where the target lies', () => {
		const { parameters } = chooseNextBlock({
			state: { day: 1, blockInDay: 0 },
			protocol: {
				...QUICK,
				obligations: [
					{ kind: 'transfer', when: { at: 'day-start' }, targetOffset: -0.2, trials: 25 }
				]
			},
			task: PUCK_RECORD
		});
		expect(parameters).toEqual({
			...{ obligation: 0, feedback: 'hidden', trials: 25, targetOffset: -0.2 }
		});
	});

	it('are refused where they cannot be run', () => {
		const bad = [
			{ kind: 'transfer', when: { at: 'day-end' } },
			{ kind: 'probe', when: { at: 'day-end' }, targetOffset: 1 },
			{ kind: 'clamp', when: { at: 'day-end' }, feedback: 'shown' }
		];
		for (const obligation of bad)
			expect(policySettingsSchema.safeParse({ obligations: [obligation] }).success).toBe(false);
	});
});

describe('a running shift', () => {
	const start = days([3]);
	const untilShift = (protocol: PolicySettingsInput = {}) =>
		lastDecision({ ...ONLY_SHIFT, ...protocol }, start.slice(0, 2));

	function lastDecision(protocol: PolicySettingsInput, states: Partial<PolicyStateInput>[]) {
		let decision: Decision | undefined;
		for (const state of states)
			decision = ask(protocol, {
				...state,
				...(decision ? { memory: decision.memory, last: runAsPlanned(decision) } : {})
			});
		if (!decision) throw new Error('no decision');
		return decision;
	}
	function ask(protocol: PolicySettingsInput, state: Partial<PolicyStateInput>): Decision {
		return chooseNextBlock({
			state: { day: 1, blockInDay: 0, ...state },
			protocol: { ...QUICK, ...protocol },
			task: PUCK_RECORD
		});
	}
	/** Thirty trials that follow only the start: the shift is under way. */
	const partly = (decision: Decision) => ({
		kind: 'shift' as const,
		errors: followLevel(decision.parameters.rule?.sigma ?? 1).slice(0, 30)
	});
	const GOAL_FAR = { aims: { shift: { share: 1, goal: 5 } } };

	it('keeps its level and starts its hold anew after a block that ran the fallback', () => {
		const protocol = { ...ONLY_SHIFT, ...GOAL_FAR };
		const offered = untilShift(GOAL_FAR);
		const running = ask(protocol, { memory: offered.memory, last: partly(offered) });
		expect(running.reasons[0]?.code).toBe('CONTINUE-SHIFT');
		expect(running.parameters.hold).toBeGreaterThan(0);
		const after = ask(protocol, { memory: running.memory, last: { kind: 'practice', trials } });
		expect(after.parameters).toMatchObject({ level: running.parameters.level, hold: 0 });
		expect(after.parameters.state?.passed).toBe(running.parameters.state?.passed);
	});

	it('is taken back for a gap also when an obliged block came first that day', () => {
		const protocol = {
			...{ ...ONLY_SHIFT, ...GOAL_FAR },
			obligations: [{ kind: 'clamp' as const, when: { at: 'day-start' as const, days: [2] } }]
		};
		const offered = untilShift(protocol);
		const running = ask(protocol, { memory: offered.memory, last: partly(offered) });
		const day2 = { day: 2, gapHours: 24 };
		const clamp = ask(protocol, { ...day2, memory: running.memory });
		expect(clamp.kind).toBe('clamp');
		const back = ask(protocol, {
			...{ day: 2, blockInDay: 1, memory: clamp.memory, last: { kind: 'clamp', trials } }
		});
		const retained = 0.2 + 0.8 * Math.exp(-24 / 120);
		expect(back.parameters.retained).toBeCloseTo(retained, 12);
		expect(back.parameters.level).toBeCloseTo((running.parameters.level ?? 0) * retained, 12);
		const again = ask(protocol, { day: 2, blockInDay: 1, memory: back.memory });
		expect(again.parameters.level).toBeCloseTo(back.parameters.level ?? 0, 12);
	});

	it('is paused by the operator’s word, and a region ended by it', () => {
		const offered = untilShift(GOAL_FAR);
		const protocol = { ...ONLY_SHIFT, ...GOAL_FAR };
		const readiness = { burden: true };
		const paused = ask(protocol, { memory: offered.memory, last: partly(offered), readiness });
		expect([paused.kind, paused.reasons[0]?.code]).toEqual(['recovery', 'BURDEN']);
		const region = { aims: { region: { share: 1, escapes: 3 } } };
		const placed = lastDecision(region, start.slice(0, 2));
		expect(placed.kind).toBe('region');
		const ended = ask(region, {
			...{ memory: placed.memory, last: { kind: 'region', trials }, readiness }
		});
		expect([ended.kind, ended.reasons[0]?.code]).toEqual(['recovery', 'BURDEN']);
		expect(ended.memory.active).toBeNull();
	});

	it('is washed out for three of the person’s own longest holds where the protocol says so', () => {
		const protocol = { ...ONLY_SHIFT, washoutHolds: 4 };
		const offered = untilShift({ washoutHolds: 4 });
		const held = ask(protocol, { memory: offered.memory, last: runAsPlanned(offered) });
		expect(held.reasons[0]?.code).toBe('WASHOUT-DUE');
		expect(held.parameters.trials).toBe(80);
	});
});

describe('a hold', () => {
	it('for stray trials ends when somebody has looked, also before a new block', () => {
		// A quarter of the trials lies far off, all around: no second cloud.
		const strayed = trials.map(([v = 0, x = 0], i) =>
			i % 4 === 0 ? [v + 0.7 * Math.cos(2.4 * i), x + 0.6 * Math.sin(2.4 * i)] : [v, x]
		);
		const ask = (state: Partial<PolicyStateInput>) =>
			chooseNextBlock({
				state: { day: 1, blockInDay: 1, ...state },
				protocol: QUICK,
				task: PUCK_RECORD
			});
		const known = ask({ last: { kind: 'practice', trials } });
		const held = ask({ memory: known.memory, last: { kind: 'practice', trials: strayed } });
		expect([held.kind, held.reasons[0]?.code]).toEqual(['hold', 'OUTLIERS']);
		expect(ask({ memory: held.memory }).kind).toBe('hold');
		const released = ask({ memory: held.memory, release: true });
		expect(released.kind).not.toBe('hold');
		expect(released.memory.cloud).toEqual(known.memory.cloud);
	});

	it('names the block that runs meanwhile where operators are blinded', () => {
		const memory = { held: 'TRACE' };
		const held = (protocol: PolicySettingsInput) =>
			chooseNextBlock({
				state: { day: 1, blockInDay: 0, memory },
				protocol: { ...QUICK, ...protocol },
				task: PUCK_RECORD
			}).parameters;
		expect(held({})).toEqual({});
		expect(held({ holdFallback: 'practice' })).toEqual({
			fallback: { kind: 'practice', trials: 60 }
		});
	});
});
