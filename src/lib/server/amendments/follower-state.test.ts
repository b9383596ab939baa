import { describe, expect, it } from 'vitest';
import { findFollowerState, type AmendmentInForce, type Follower } from './follower-state';

const person: Follower = {
	follows: false,
	isOver: false,
	isInChain: true,
	hasConsented: false,
	isMidVisit: false
};
const amendment: AmendmentInForce = {
	follows: 'in-flight',
	renewal: 'nobody',
	withoutRenewal: 'stays',
	runs: true,
	chainDiffers: false
};
const stateOf = (who: Partial<Follower>, what: Partial<AmendmentInForce> = {}) =>
	findFollowerState({ ...person, ...who }, { ...amendment, ...what });

describe('what becomes of somebody in flight', () => {
	it('is to be moved over once the amendment runs, and not before', () => {
		expect(stateOf({}, { runs: false })).toBe('not-yet');
		expect(stateOf({})).toBe('due');
	});

	it('waits for the end of a visit that is decided already', () => {
		expect(stateOf({ isMidVisit: true })).toBe('after-visit');
	});

	it('waits for the new consent where one is asked for', () => {
		expect(stateOf({}, { renewal: 'visits-to-come' })).toBe('needs-consent');
		expect(stateOf({}, { renewal: 'everybody' })).toBe('needs-consent');
		expect(stateOf({ hasConsented: true }, { renewal: 'everybody' })).toBe('due');
	});

	it('stops without consent only where that is declared, and only once it runs', () => {
		const stops = { renewal: 'visits-to-come', withoutRenewal: 'stops' } as const;
		expect(stateOf({}, stops)).toBe('stopped');
		expect(stateOf({}, { ...stops, runs: false })).toBe('needs-consent');
		expect(stateOf({ hasConsented: true }, stops)).toBe('due');
		expect(stateOf({}, { ...stops, renewal: 'nobody' })).toBe('due');
	});

	it('is nothing where their chain does not fit, unless they have no chain yet', () => {
		expect(stateOf({}, { chainDiffers: true })).toBe('chain-differs');
		expect(stateOf({ isInChain: false }, { chainDiffers: true })).toBe('due');
	});

	it('is nothing for who has finished, keeps theirs as declared, or follows already', () => {
		expect(stateOf({ isOver: true })).toBe('over');
		expect(stateOf({}, { follows: 'new-people' })).toBe('keeps');
		expect(stateOf({ follows: true })).toBe('follows');
	});
});
