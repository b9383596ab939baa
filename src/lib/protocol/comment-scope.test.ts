import { describe, expect, it } from 'vitest';
import { createFullContent } from '../../../tests/support/full-protocol';
import { findCommentScope } from './comment-scope';
import { describeProtocol } from './describe-protocol';

const content = createFullContent();
const [knowing, blinded] = [{ withRule: true }, { withRule: false }];

describe('whom a comment is for', () => {
	it('is everybody where everybody reads the same words', () => {
		expect(findCommentScope(content, 'booking/clock', knowing)).toBe('all');
		expect(findCommentScope(content, 'booking', knowing)).toBe('all');
	});

	it('is only who may know the rule where others read less, or nothing', () => {
		expect(findCommentScope(content, 'aims/settle', knowing)).toBe('rule');
		expect(findCommentScope(content, 'visits/visit-2-arm-fixed', knowing)).toBe('rule');
		expect(findCommentScope(content, 'visits', knowing)).toBe('rule');
		expect(findCommentScope(content, 'settings/policy.probeEvery', knowing)).toBe('rule');
	});

	it('is everybody for what a blinded writer reads, and there is no place that they do not', () => {
		expect(findCommentScope(content, 'visits', blinded)).toBe('all');
		const theirs = describeProtocol(content, blinded).map(({ key }) => key);
		for (const part of describeProtocol(content, knowing)) {
			const scope = findCommentScope(content, part.key, blinded);
			expect([part.key, scope]).toEqual([part.key, theirs.includes(part.key) ? 'all' : null]);
		}
		expect(findCommentScope(content, 'limits/shift', blinded)).toBeNull();
	});
});
