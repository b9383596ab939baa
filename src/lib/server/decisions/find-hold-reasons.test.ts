import { describe, expect, it } from 'vitest';
import { findHoldReasons } from './find-hold-reasons';

const rails = { automaticCoverMax: 0.3, automaticReachSdMax: 3.5, fallback: 'practice' as const };
const region = { kind: 'region' as const, code: 'ONLY-AIM', coverShare: 0.2, reachSd: 3 };

describe('findHoldReasons', () => {
	it('lets a region inside the guard rails run', () => {
		expect(findHoldReasons(region, rails)).toEqual([]);
	});

	it('holds a region exactly above either limit, and not at it', () => {
		expect(findHoldReasons({ ...region, coverShare: 0.3, reachSd: 3.5 }, rails)).toEqual([]);
		const beyond = findHoldReasons({ ...region, coverShare: 0.31, reachSd: 3.6 }, rails);
		expect(beyond.map((reason) => reason.code)).toEqual(['COVER-HIGH', 'REACH-FAR']);
	});

	it.each([
		['hold', 'OUTLIERS'],
		['stop', 'PAIN'],
		['wait', 'LATE-WAIT'],
		['rest', 'FATIGUE']
	] as const)('always holds a %s: it has no trials of its own', (kind, code) => {
		const choice = { kind, code, coverShare: null, reachSd: null };
		expect(findHoldReasons(choice, rails)).toEqual([{ code, values: {} }]);
	});

	it('never holds plain blocks', () => {
		const practice = {
			kind: 'practice' as const,
			code: 'COOL-DOWN',
			coverShare: null,
			reachSd: null
		};
		expect(findHoldReasons(practice, rails)).toEqual([]);
	});

	it('holds what a limit of the protocol forbids, and not what stands at it', () => {
		const limits = { shiftMax: 0.3, penaltyShareMax: 0.7 };
		const hard = { ...region, catchShare: 0.71 };
		expect(findHoldReasons(hard, rails, limits)).toEqual([
			{ code: 'PENALTY-OVER-LIMIT', values: { share: 0.71, most: 0.7 } }
		]);
		const shift = { kind: 'shift' as const, code: 'AIM', coverShare: null, reachSd: null };
		const far = findHoldReasons({ ...shift, moveBy: -0.31 }, rails, limits);
		expect(far).toEqual([{ code: 'SHIFT-OVER-LIMIT', values: { move: 0.31, most: 0.3 } }]);
		expect(findHoldReasons({ ...shift, moveBy: -0.3 }, rails, limits)).toEqual([]);
		expect(findHoldReasons({ ...region, catchShare: 0.7 }, rails, limits)).toEqual([]);
		expect(findHoldReasons({ ...shift, moveBy: 9 }, rails)).toEqual([]);
	});
});
