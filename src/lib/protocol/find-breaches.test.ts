import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createFullContent } from '../../../tests/support/full-protocol';
import { readEnvelope, describeEnvelope } from './envelope';
import { findBreaches, type BlockToCheck } from './find-breaches';

// The pattern: regions of at most .8, a target up to 3 SD in steps of at most 1 SD; limits .5 and .4 m.
const envelope = readEnvelope(createFullContent());
const region = (share: number, reachSd = 2) => ({
	...{
		center: [0, 0],
		shape: [
			[1, 0],
			[0, 1]
		],
		share,
		stay: 0.3,
		reachSd
	},
	centerInUnits: [2.4, 0.2]
});
const check = (change: Partial<BlockToCheck>) =>
	findBreaches(envelope, {
		kind: 'region',
		parameters: { trials: 60 },
		trialsBefore: 0,
		isListed: false,
		...change
	}).map(({ limit, approved }) => [limit, approved]);

describe('the approved envelope', () => {
	it('lets blocks at its very edge pass', () => {
		expect(check({ parameters: { trials: 60, region: region(0.5, 4) } })).toEqual([]);
		expect(check({ trialsBefore: 240 })).toEqual([]);
	});

	it('names each number that lies outside', () => {
		expect(check({ trialsBefore: 241 })).toEqual([
			['trials a visit', 300],
			['trials of a day with challenges', 300]
		]);
		expect(check({ parameters: { region: region(0.51) } })).toEqual([['penalty', 0.5]]);
		expect(check({ parameters: { region: region(0.81) } })).toEqual([
			['share of a region', 0.8],
			['penalty', 0.5]
		]);
		expect(check({ parameters: { region: region(0.4, 4.1) } })).toEqual([
			['way out of a region', 4]
		]);
		expect(check({ parameters: { levels: [0.1, -0.41] } })).toEqual([['target moved', 0.4]]);
		const far = { ...region(0.4), centerInUnits: [4.2, 0] };
		expect(check({ parameters: { region: far } })).toEqual([['release_speed', 4]]);
	});

	it('holds listed blocks to the protocol’s limits, not to the rule’s', () => {
		const parameters = { region: region(0.5, 9) };
		expect(check({ isListed: true, parameters })).toEqual([]);
		const more = { region: region(0.6) };
		expect(check({ isListed: true, parameters: more })).toEqual([['penalty', 0.5]]);
	});

	it('finds a breach if and only if a number is over its limit', () => {
		const shares = fc.double({ min: 0.01, max: 0.99, noNaN: true });
		const reaches = fc.double({ min: 0, max: 8, noNaN: true });
		fc.assert(
			fc.property(shares, reaches, fc.integer({ min: 0, max: 600 }), (share, reach, before) => {
				const found = check({
					trialsBefore: before,
					parameters: { trials: 60, region: region(share, reach) }
				});
				const isOver = share > 0.5 + 1e-6 || reach > 4 + 1e-6 || before + 60 > 300;
				if (Math.abs(share - 0.5) < 1e-6 || Math.abs(reach - 4) < 1e-6) return;
				expect(found.length > 0).toBe(isOver);
			})
		);
	});

	it('is told with every number', () => {
		const terms = describeEnvelope(envelope).map(({ term }) => term);
		expect(terms).toEqual([
			'Trials a visit',
			'Minutes a visit',
			'Challenges',
			'Penalized regions of the rule',
			'Way out of a region',
			'Step of the target',
			'Target moved by the rule',
			'Penalty, whoever decides',
			'Target, whoever decides',
			'Largest release_speed'
		]);
	});
});
