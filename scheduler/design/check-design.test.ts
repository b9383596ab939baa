import { describe, expect, it } from 'vitest';
import { checkDesign } from './check-design.ts';
import { designSchema, type Design } from './design.ts';
import { block, designWith, faultyDesign, soundDesign, visit } from './designs.test-data.ts';
import { FINDING_CODES, type FindingCode } from './finding.ts';

const codesOf = (design: Design) => [...new Set(checkDesign(design).map(({ code }) => code))];

describe('the checker', () => {
	it('finds nothing in a sound design', () => {
		expect(checkDesign(soundDesign())).toEqual([]);
	});

	it('names all twelve faults of one protocol, each with its numbers in words', () => {
		const findings = checkDesign(faultyDesign());
		expect(codesOf(faultyDesign()).sort()).toEqual([...FINDING_CODES].sort());
		for (const { text, numbers, key, code } of findings) {
			expect(text).toMatch(/\d/);
			expect(Object.keys(numbers).length).toBeGreaterThan(0);
			expect(key.startsWith(code)).toBe(true);
		}
	});

	it('gives every finding a key of its own', () => {
		const keys = checkDesign(faultyDesign()).map(({ key }) => key);
		expect(new Set(keys).size).toBe(keys.length);
	});

	it('judges nothing that is not written yet', () => {
		expect(checkDesign(designSchema.parse({}))).toEqual([]);
		const open = designWith(
			[['visits', 1, 'blocks', 0, 'trials'], null],
			[['visits', 2, 'gapBefore', 'minHours'], null],
			[['trialSeconds'], null]
		);
		expect(checkDesign(open)).toEqual([]);
	});

	it('holds a design against what the widest rig of the lab allows', () => {
		const rigs = [
			{ name: 'Gull', minutesPerVisit: 50, trialsPerVisit: 400 },
			{ name: 'Heron', minutesPerVisit: 55, trialsPerVisit: 100 }
		];
		const found = checkDesign(soundDesign(), { rigs });
		expect(new Set(found.map(({ numbers }) => numbers.limit))).toEqual(new Set([55]));
		expect(found[0]?.text).toContain('rig Heron');
	});
});

/** Designs just inside (none of the code) and just outside a limit. */
const LIMITS: [FindingCode, string, (size: number) => Design, number[], number[]][] = [
	[
		'unequal-trials',
		'trials of the fixed arm beside 120',
		(trials) => withFixed([block('practice', 60), block('practice', trials - 60)]),
		[120],
		[80, 119, 121, 170]
	],
	[
		'unequal-rest',
		'seconds after each trial beside none',
		(seconds) =>
			withFixed([
				block('practice', 60, { restBetweenTrialsSeconds: seconds }),
				block('practice', 60, { restBetweenTrialsSeconds: seconds })
			]),
		[0],
		[0.1, 1, 10]
	],
	[
		'unequal-rest',
		'minutes between blocks beside none',
		(minutes) =>
			withFixed([block('practice', 60, { restAfterMinutes: minutes }), block('practice', 60)]),
		[0],
		[0.5, 1, 8]
	],
	[
		'unequal-rest',
		'minutes of a rest block beside one of 5',
		(minutes) => {
			const rested = (length: number) => [
				...[block('adaptive', 60), block('rest', 0, { restMinutes: length })],
				block('adaptive', 60)
			];
			return designWith(
				[['visits', 1, 'blocks'], rested(5)],
				[['visits', 1, 'armBlocks', 'fixed'], rested(minutes)]
			);
		},
		[5],
		[4.5, 5.5, 20]
	],
	[
		'no-baseline',
		'baseline trials where a cloud needs 12',
		(trials) => designWith([['visits', 0, 'blocks', 0, 'trials'], trials]),
		[12, 13, 100],
		[1, 11]
	],
	[
		'no-baseline',
		'baseline trials of which 5 are warm-up',
		(trials) =>
			designWith([['visits', 0, 'blocks', 0], block('baseline', trials, { warmUpTrials: 5 })]),
		[17, 40],
		[12, 16]
	],
	[
		'retention-early',
		'hours at the least before retention',
		(hours) => designWith([['visits', 4, 'gapBefore', 'minHours'], hours]),
		[24, 24.5, 144],
		[2, 12, 23, 23.9]
	],
	[
		'retention-early',
		'hours by the clock, of which a clock change takes one',
		(hours) =>
			designWith(
				[['visits', 4, 'gapBefore', 'minHours'], hours],
				[['booking', 'dayMeaning'], 'clock-time']
			),
		[25, 30],
		[24, 24.9]
	],
	[
		'retention-early',
		'hours of which 4 may give way',
		(hours) =>
			designWith(
				[['visits', 4, 'gapBefore', 'minHours'], hours],
				[['relaxation'], [{ rule: 'gap-shortest', by: 4 }]]
			),
		[28],
		[24, 27]
	],
	[
		'order-fixed',
		'fixed arms of three that run the region first',
		(first) => {
			const manipulated = (isFirst: boolean) => {
				const both = [
					block('region', 60, { region: {} }),
					block('shift', 60, { shift: { from: 0, to: 0.2 } })
				];
				return isFirst ? both : both.toReversed();
			};
			return designWith(
				[['arms'], ['a', 'b', 'c'].map((key) => ({ key, name: key, rule: 'fixed', master: null }))],
				...['a', 'b', 'c'].map(
					(key, i) => [['visits', 1, 'armBlocks', key], manipulated(i < first)] as const
				)
			);
		},
		[1, 2],
		[0, 3]
	],
	[
		'few-trials',
		'trials of adaptive time where the shift rule needs 100 in three blocks',
		(trials) => withAdaptive(trials),
		[34, 60],
		[10, 12, 33]
	],
	[
		'few-trials',
		'trials of adaptive time with regions alone, where a cloud needs 12',
		(trials) => withAdaptive(trials, { aims: { region: { share: 1, escapes: 3 } } }),
		[12, 40],
		[4, 11]
	],
	[
		'no-washout',
		'plain trials between a region and a probe',
		(trials) => withBefore(block('region', 60, { region: {} }), trials),
		[40, 60],
		[1, 20, 39]
	],
	[
		'no-washout',
		'plain trials between a shift and a probe',
		(trials) => withBefore(block('shift', 60, { shift: { from: 0, to: 0.3 } }), trials),
		[60, 90],
		[1, 40, 59]
	],
	[
		'no-washout',
		'blocks of adaptive time after which plain trials are left to the policy',
		(trials) =>
			withAdaptive(60, {
				aims: { region: { share: 1, escapes: 3 } },
				cool: { blocks: 0, trials }
			}),
		[40, 60],
		[0, 39]
	],
	[
		'impossible-gap',
		'nights asked of 20 to 28 hours',
		(nights) => designWith([['visits', 2, 'gapBefore', 'nightsBetween'], nights]),
		[0, 1],
		[2, 5]
	],
	[
		'impossible-gap',
		'longest hours of a gap of at least 30, with a window of ten hours',
		(hours) =>
			designWith([
				['visits', 2, 'gapBefore'],
				{ minHours: 30, targetHours: 30, maxHours: hours, nightsBetween: 0 }
			]),
		[44, 48],
		[31, 43]
	],
	[
		'impossible-gap',
		'practice days in a row on workdays without a longer gap',
		(days) => {
			const practice = Array.from({ length: days }, (_, i) =>
				visit(`Day ${i + 1}`, 'practice', [block('adaptive', 60)])
			);
			const first = { ...visit('Baseline', 'baseline', [block('baseline', 60)]), gapBefore: null };
			const gap = { minHours: 48, targetHours: 72, maxHours: 336, nightsBetween: 2 };
			const days2 = practice.map((one, i) => (i === 0 ? { ...one, gapBefore: gap } : one));
			return designWith([['visits'], [first, ...days2]], [['booking', 'pauses', 'count'], 0]);
		},
		[4, 5],
		[6, 7]
	],
	[
		'impossible-gap',
		'minutes of give where exactly 24 h must pass, clocks changing',
		(tolerance) => {
			const gap = { minHours: 24, targetHours: 24, maxHours: 24, nightsBetween: 1 };
			return designWith(
				...[1, 2, 3].map((at) => [['visits', at, 'gapBefore'], gap] as const),
				[['booking', 'pauses', 'count'], 0],
				[['booking', 'sameTimeToleranceMinutes'], tolerance],
				[
					['booking', 'weekdays'],
					[1, 2, 3, 4, 5, 6, 7]
				]
			);
		},
		[60, 120],
		[0, 45]
	],
	[
		'burden',
		'minutes of a visit where 90 are the limit',
		(minutes) => designWith([['visits', 1, 'minutes'], minutes]),
		[16, 90],
		[91, 200]
	],
	[
		'burden',
		'minutes reserved for 120 trials of 8 s',
		(minutes) => designWith([['visits', 1, 'minutes'], minutes]),
		[16, 17],
		[5, 15]
	],
	[
		'burden',
		'trials of a visit where 300 are the limit',
		(trials) => withAdaptive(trials / 2),
		[300],
		[302, 600]
	],
	[
		'noise-rule',
		'quantile of the band beside a strict one of .999',
		(q1) => designWith([['policy'], { band: { q1 } }]),
		[0.9, 0.95, 0.99],
		[0.5, 0.8]
	],
	[
		'noise-rule',
		'SD that the means may wander',
		(wander) => designWith([['policy'], { band: { wander } }]),
		[0.1, 0.15, 0.3],
		[0, 0.03]
	],
	[
		'noise-rule',
		'first step of a shift in SD',
		(firstStepSd) => designWith([['policy'], { shift: { rule: { firstStepSd, stepCapSd: 1.5 } } }]),
		[1, 1.2],
		[0.5, 0.99]
	],
	[
		'noise-rule',
		'relative escape at which a region counts as left',
		(relativeEscape) => designWith([['policy'], { region: { relativeEscape } }]),
		[0.1, 0.3],
		[0]
	],
	[
		'retention-disturbed',
		'distance by which the target of the retention test is moved',
		(to) =>
			designWith([['visits', 4, 'blocks', 0], block('retention', 60, { shift: { from: 0, to } })]),
		[0],
		[-0.2, 0.001, 0.3]
	],
	[
		'instruction-differs',
		'version read to the fixed arm beside version 1',
		(version) =>
			designWith(
				[['visits', 1, 'blocks'], [1, 2].map(() => block('adaptive', 60, { instruction: '1' }))],
				[
					['visits', 1, 'armBlocks', 'fixed'],
					[
						block('practice', 60, { instruction: '1' }),
						block('practice', 60, { instruction: String(version) })
					]
				]
			),
		[1],
		[2, 3]
	]
];

describe('a limit', () => {
	it.each(LIMITS)('of %s: %s', (code, _what, make, inside, outside) => {
		for (const size of inside) expect([size, codesOf(make(size))]).toEqual([size, without(code)]);
		for (const size of outside) expect([size, codesOf(make(size))]).toEqual([size, withOne(code)]);

		function without(absent: FindingCode): unknown {
			return expect.not.arrayContaining([absent]);
		}
		function withOne(present: FindingCode): unknown {
			return expect.arrayContaining([present]);
		}
	});

	it.each(['shown', 'clamped-to-zero', 'clamped-to-noise'] as const)(
		'of retention lets no result be seen as %s',
		(feedback) => {
			const seen = designWith([['visits', 4, 'blocks', 0, 'feedback'], feedback]);
			expect(codesOf(seen)).toEqual(['retention-disturbed']);
			const hidden = designWith([['visits', 4, 'blocks', 0, 'feedback'], 'hidden']);
			expect(codesOf(hidden)).toEqual([]);
		}
	);

	it('of visits and hours asks for a reason, not for a repair', () => {
		const many = Array.from({ length: 31 }, (_, i) =>
			visit(`Day ${i}`, i === 0 ? 'baseline' : 'practice', [
				block(i === 0 ? 'baseline' : 'adaptive', 60)
			])
		);
		const found = (count: number) =>
			checkDesign(
				designWith([['visits'], many.slice(0, count)], [['booking', 'pauses', 'count'], 10])
			).filter(({ key }) => key === 'burden:visits');
		expect(found(30)).toEqual([]);
		expect(found(31)).toMatchObject([{ severity: 'minor', numbers: { visits: 31, limit: 30 } }]);
	});
});

function withFixed(blocks: ReturnType<typeof block>[]): Design {
	return designWith([['visits', 1, 'armBlocks', 'fixed'], blocks]);
}

function withAdaptive(trials: number, policy: unknown = {}): Design {
	const blocks = [block('adaptive', trials), block('adaptive', trials)];
	return designWith(...[1, 2, 3].map((at) => [['visits', at, 'blocks'], blocks] as const), [
		['policy'],
		policy
	]);
}

/** In both arms a manipulated block, plain trials, a probe. */
function withBefore(manipulated: ReturnType<typeof block>, plain: number): Design {
	return designWith([
		['visits', 1, 'blocks'],
		[manipulated, block('practice', plain), block('probe', 40)]
	]);
}
