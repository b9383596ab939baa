import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { canonicalJson } from '../canonical-json.ts';
import { decideNextBlock } from '../decide.ts';
import { explainRecord } from '../explain.ts';
import { PUCK_RECORD } from '../planted-trials.test-data.ts';
import type { PolicyMemory } from '../policy-memory.ts';
import { replayDecision } from '../replay-decision.ts';
import { findYokedBlock } from './find-yoked-block.ts';
import {
	computeMatchScales,
	describeBaseline,
	pairInOrder,
	rankMatches,
	type Candidate
} from './match-people.ts';
import { LATE_RULES, ORPHAN_RULES, yokedRuleSchema, type YokedRule } from './yoked-rule.ts';

const digest = (text: string) => createHash('sha256').update(text).digest('hex');
const versions = { engineVersion: 'test', runtimeVersion: 'node' };

const REGION = {
	kind: 'region',
	parameters: {
		region: {
			center: [0, 0],
			shape: [
				[1, 0],
				[0, 1]
			],
			...{ share: 0.8, stay: 0.1 }
		}
	}
} as const;
const SHIFT = { kind: 'shift', parameters: { levels: [0, 0.1, 0.2], trials: 3 } } as const;

function giveRule(given: Record<string, unknown>): YokedRule {
	return yokedRuleSchema.parse({
		...{ kind: 'yoked', block: 0, nowHours: 100, previousEndHours: 90, gapMaxHours: 48 },
		...given
	});
}

function decide(rule: YokedRule, memory?: PolicyMemory, readiness = {}) {
	const state = { day: 1, blockInDay: 0, readiness, ...(memory ? { memory } : {}) };
	return decideNextBlock({ state, task: PUCK_RECORD, rule, versions, digest });
}

const master = (blocks: object[], withdrawn = false) => ({ code: 'M1', blocks, withdrawn });

describe('pairing', () => {
	const person = (code: string, logVolume: number, meanError = 0): Candidate => ({
		...{ code, traits: { logVolume, meanError } }
	});
	const scales = { logVolumeSd: 1, meanErrorSd: 1 };

	it('gives each partner the nearest free master, ties by code', () => {
		const masters = [person('C', 1), person('B', 1), person('A', 5)];
		const partners = [person('P1', 1.2), person('P2', 1.1), person('P3', 0), person('P4', 0)];
		const { pairs, unpaired } = pairInOrder({ partners, masters, scales });
		expect(pairs.map(({ partner, master: code }) => partner + code)).toEqual(['P1B', 'P2C', 'P3A']);
		expect(unpaired).toEqual(['P4']);
		expect(pairs[0]?.ladder.map(({ code }) => code)).toEqual(['B', 'C', 'A']);
	});

	it('leaves pairs that were made before as they are', () => {
		const { pairs } = pairInOrder({
			partners: [person('P1', 0), person('P2', 0)],
			masters: [person('A', 0), person('B', 3)],
			...{ scales, paired: [{ partner: 'P1', master: 'A' }] }
		});
		expect(pairs.map(({ partner, master: code }) => partner + code)).toEqual(['P2B']);
	});

	it('does not depend on the order in which masters are listed', () => {
		const traits = fc.record({
			logVolume: fc.double({ min: -3, max: 3, noNaN: true }),
			meanError: fc.double({ min: 0, max: 1, noNaN: true })
		});
		fc.assert(
			fc.property(traits, fc.array(traits, { minLength: 1, maxLength: 8 }), (own, others) => {
				const candidates = others.map((found, i) => ({ code: `M${i}`, traits: found }));
				const ranked = rankMatches({ code: 'P', traits: own }, candidates, scales);
				const turned = rankMatches({ code: 'P', traits: own }, candidates.toReversed(), scales);
				expect(turned).toEqual(ranked);
			})
		);
	});

	it('reads volume from the cloud and keeps a trait that all share from dividing by nothing', () => {
		const covariance = [
			[4, 0],
			[0, 1]
		];
		const found = describeBaseline({ covariance, meanError: 0.2 });
		expect(found).toMatchObject({
			ok: true,
			traits: { logVolume: expect.closeTo(Math.log(2), 12) }
		});
		const flat = [
			[1, 1],
			[1, 1]
		];
		expect(describeBaseline({ covariance: flat, meanError: 0 })).toEqual({
			...{ ok: false, reason: 'singular-cloud' }
		});
		const same = { logVolume: 1, meanError: 2 };
		expect(computeMatchScales([same, same])).toEqual({ logVolumeSd: 1, meanErrorSd: 1 });
	});
});

describe('a yoked decision', () => {
	it('is stored with reasons and the ladder, explains itself and replays', () => {
		const rule = giveRule({ master: master([{ ...REGION, scoredAtHours: 70 }]) });
		const stored = decide(rule);
		expect(stored).toMatchObject({
			kind: 'region',
			parameters: { ...REGION.parameters, trials: 60 },
			reasons: [
				{
					...{ rung: 'yoked', code: 'YOKED' },
					values: { block: 1, master: 'M1', leadHours: 30, isLeadKept: true }
				}
			],
			ladder: [
				{ rung: 'limits', code: null },
				{ rung: 'yoked', code: 'YOKED' }
			]
		});
		expect(explainRecord(stored).reasons[0]?.text).toBe(
			'The master’s block 1, scored 30 hours ago.'
		);
		const again = replayDecision({ stored, inputs: stored.inputs, versions, digest });
		expect(again).toEqual({ equal: true, sameVersions: true });
		expect(canonicalJson(decide(rule))).toBe(canonicalJson(stored));
	});

	it('gives a shift as the course that the master’s rule took', () => {
		const rule = giveRule({ master: master([{ ...SHIFT, scoredAtHours: 99 }]) });
		expect(decide(rule).parameters).toEqual({ ...SHIFT.parameters, level: 0 });
	});

	it('keeps the last level when the master withdraws, and none before any', () => {
		const settings = { orphan: 'keep-last-level' };
		const first = decide(giveRule({ master: master([{ ...SHIFT, scoredAtHours: 9 }]), settings }));
		const rule = giveRule({ block: 1, settings, master: master([], true) });
		const kept = decide(rule, first.memory);
		expect([kept.kind, kept.reasons[0]?.code, kept.parameters.level]).toEqual([
			...['shift', 'ORPHAN-KEEP', 0.2]
		]);
		expect(decide(rule).reasons[0]?.code).toBe('ORPHAN-PRACTICE');
	});

	it('waits for a late master up to the longest gap', () => {
		const rule = giveRule({ master: master([{ ...REGION, scoredAtHours: null }]) });
		const waiting = decide(rule);
		expect(waiting).toMatchObject({
			...{ kind: 'wait', parameters: {}, prediction: { about: 'nothing' } },
			reasons: [{ code: 'LATE-WAIT', values: { untilHours: 138 } }]
		});
		expect(decide({ ...rule, nowHours: 140 }).reasons[0]?.code).toBe('LATE-PRACTICE');
	});

	it('stops at the partner’s own limits', () => {
		const rule = giveRule({ master: master([{ ...REGION, scoredAtHours: 70 }]) });
		const stopped = decide(rule, undefined, { pain: 6 });
		expect([stopped.kind, stopped.reasons[0]?.code]).toEqual(['stop', 'PAIN']);
	});
});

describe('chains of a yoked pair', () => {
	it('never issue a block before the master’s was scored', () => {
		const hoursSchema = fc.double({ min: 0, max: 60, noNaN: true });
		const chain = fc.record({
			gaps: fc.array(hoursSchema, { minLength: 24, maxLength: 24 }),
			lag: hoursSchema,
			withdrawnAfter: fc.integer({ min: 0, max: 40 }),
			orphan: fc.constantFrom(...ORPHAN_RULES),
			late: fc.constantFrom(...LATE_RULES)
		});
		fc.assert(
			fc.property(chain, ({ gaps, lag, withdrawnAfter, orphan, late }) => {
				let hour = 0;
				const blocks = gaps.map((gap) => ({ ...REGION, scoredAtHours: (hour += gap) }));
				let before = lag;
				gaps.forEach((_, block) => {
					const nowHours = before + 24;
					const rule = giveRule({
						...{ block, nowHours, previousEndHours: before, settings: { orphan, late } },
						master: master(blocks.slice(0, withdrawnAfter), block >= withdrawnAfter)
					});
					const got = findYokedBlock(rule, null);
					before = nowHours;
					if (got.code !== 'YOKED') return;
					expect(blocks[block]?.scoredAtHours).toBeLessThanOrEqual(nowHours);
					expect(got.master).toBe('M1');
				});
			}),
			{ numRuns: 200 }
		);
	});
});
