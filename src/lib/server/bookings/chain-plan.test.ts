import { describe, expect, it } from 'vitest';
import { createPuckProtocol } from '../../../../tests/support/puck-protocol';
import { toChainPlan } from './load-person-plan';

describe('the plan of visits that bookings obey', () => {
	const protocol = createPuckProtocol();
	const meaningOf = (dayMeaning?: 'elapsed-hours' | 'clock-time') => {
		const booking = { ...protocol.booking, ...(dayMeaning ? { dayMeaning } : {}) };
		const { visits } = toChainPlan({ ...protocol, booking });
		return new Set(visits.flatMap(({ gapBefore }) => gapBefore?.hoursMean ?? []));
	};

	it('counts hours that pass unless the protocol says otherwise', () => {
		expect(meaningOf()).toEqual(new Set(['elapsed']));
		expect(meaningOf('elapsed-hours')).toEqual(new Set(['elapsed']));
	});

	it('counts hours by the clock where the protocol says so', () => {
		expect(meaningOf('clock-time')).toEqual(new Set(['clock']));
	});
});
