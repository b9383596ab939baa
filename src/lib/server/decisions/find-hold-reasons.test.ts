import { describe, expect, it } from 'vitest';
import { findHoldReasons } from './find-hold-reasons';

const rails = { automaticCoverMax: 0.3, automaticReachSdMax: 3.5, fallback: 'practice' as const };
const region = { kind: 'region', code: 'ONLY-AIM', coverShare: 0.2, reachSd: 3 };

describe('findHoldReasons', () => {
	it('lets a region inside the guard rails run', () => {
		expect(findHoldReasons(region, rails)).toEqual([]);
	});

	it('holds a region exactly above either limit, and not at it', () => {
		expect(findHoldReasons({ ...region, coverShare: 0.3, reachSd: 3.5 }, rails)).toEqual([]);
		const beyond = findHoldReasons({ ...region, coverShare: 0.31, reachSd: 3.6 }, rails);
		expect(beyond.map((reason) => reason.code)).toEqual(['COVER-HIGH', 'REACH-FAR']);
	});

	it('always holds what the rule itself leaves to a person', () => {
		const hold = { kind: 'hold', code: 'OUTLIERS', coverShare: null, reachSd: null };
		expect(findHoldReasons(hold, rails)).toEqual([{ code: 'OUTLIERS', values: {} }]);
	});

	it('never holds plain blocks', () => {
		const practice = { kind: 'practice', code: 'COOL-DOWN', coverShare: null, reachSd: null };
		expect(findHoldReasons(practice, rails)).toEqual([]);
	});
});
