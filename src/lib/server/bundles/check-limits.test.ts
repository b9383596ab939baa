import { describe, expect, it } from 'vitest';
import { DECISION_KINDS } from '$scheduler/policies/policy-memory';
import { createPuckProtocol } from '../../../../tests/support/puck-protocol';
import { findLimitFaults } from './check-limits';

const protocol = createPuckProtocol();
const rig = { isPowered: false, minutesPerVisit: 60, trialsPerVisit: 300, variableMax: {} };
const region = { center: [0, 0], shape: [[1], [0]], share: 0.6, stay: 0.2 };
const rule = { sigma: 0.1, goal: 0.3 };

function listFaults(
	kind: string,
	parameters: Record<string, unknown>,
	variableMax: Record<string, number> = {}
) {
	const limits = { protocol, rig: { ...rig, variableMax }, visitNumber: 2 };
	return findLimitFaults({ kind, parameters }, limits).map(({ code }) => code);
}

describe('findLimitFaults', () => {
	it('refuses every kind that has nothing to run, and no other', () => {
		const all = { trials: 60, region, rule, feedback: 'hidden', targetOffset: 0.2 };
		const refused = DECISION_KINDS.filter((kind) => listFaults(kind, all).length > 0);
		expect(refused).toEqual(['rest', 'stop', 'hold', 'wait']);
	});

	it.each<[string, Record<string, unknown>, string]>([
		['other', { trials: 60 }, 'kind'],
		['region', { trials: 60 }, 'parameters'],
		['shift', { trials: 60 }, 'parameters'],
		['shift', { trials: 60, levels: [0.1] }, 'parameters'],
		['clamp', { trials: 60 }, 'parameters'],
		['clamp', { trials: 60, feedback: 'clamped-to-noise' }, 'parameters'],
		['transfer', { trials: 60 }, 'parameters'],
		['practice', { trials: 60, unheardOf: 1 }, 'parameters'],
		['practice', { trials: 0 }, 'trials'],
		['probe', { trials: 301 }, 'trials'],
		['transfer', { trials: 60, targetOffset: 90 }, 'target'],
		['shift', { trials: 60, rule: { ...rule, goal: -90 } }, 'target'],
		['shift', { trials: 2, levels: [0.1, 90] }, 'target']
	])('refuses %s with %j for its %s', (kind, parameters, code) => {
		expect(listFaults(kind, parameters)).toEqual([code]);
	});

	it('refuses a region beyond the rig, also one that names no place in units', () => {
		expect(listFaults('region', { trials: 60, region }, { release_speed: 1 })).toEqual([
			'variable'
		]);
		const placed = { ...region, centerInUnits: [0.9, 0], exitInUnits: [1.1, 0] };
		const limit = { release_speed: 1 };
		expect(listFaults('region', { trials: 60, region: placed }, limit)).toEqual(['variable']);
		const inside = { ...placed, exitInUnits: [0.8, 0] };
		expect(listFaults('region', { trials: 60, region: inside }, limit)).toEqual([]);
	});

	it('counts what the rig does not allow out of the reach of a moved target', () => {
		const transfer = { trials: 60, targetOffset: 0.3 };
		expect(listFaults('transfer', transfer)).toEqual([]);
		expect(listFaults('transfer', transfer, { release_speed: 1 })).toEqual(['target']);
	});

	const withLimits = (own: Partial<typeof protocol.limits>, ofRig: object = {}) => ({
		protocol: { ...protocol, limits: { ...protocol.limits, ...own } },
		rig: { ...rig, ...ofRig },
		visitNumber: 2
	});
	const moved = (by: number) => ({
		kind: 'shift',
		parameters: { trials: 2, levels: [0, by], rule }
	});
	const caught = (share: number) => ({
		kind: 'region',
		parameters: { trials: 60, region: { ...region, share } }
	});
	const codesOf = (...given: Parameters<typeof findLimitFaults>) =>
		findLimitFaults(...given).map(({ code }) => code);

	it.each([
		['protocol', withLimits({ shiftMax: 0.3, penaltyShareMax: 0.6 })],
		['rig', withLimits({}, { shiftMax: 0.3, penaltyShareMax: 0.6 })],
		['rig, where both say it', withLimits({ shiftMax: 2 }, { shiftMax: 0.3, penaltyShareMax: 0.6 })]
	])('refuses a shift or a penalty above the limit of the %s, and not at it', (_, limits) => {
		expect(codesOf(moved(-0.3), limits)).toEqual([]);
		expect(codesOf(moved(-0.31), limits)).toEqual(['shift']);
		expect(codesOf(caught(0.6), limits)).toEqual([]);
		expect(codesOf(caught(0.61), limits)).toEqual(['penalty']);
	});

	it('refuses a shift whose goal lies beyond the limit, however small its first levels', () => {
		expect(codesOf(moved(0.01), withLimits({ shiftMax: 0.29 }))).toEqual(['shift']);
	});

	it('refuses a region beyond what the protocol itself may ask for', () => {
		const placed = { ...region, centerInUnits: [1.1, 0] };
		const plan = { kind: 'region', parameters: { trials: 60, region: placed } };
		expect(codesOf(plan, withLimits({ variableMax: { release_speed: 1.2 } }))).toEqual([]);
		expect(codesOf(plan, withLimits({ variableMax: { release_speed: 1 } }))).toEqual(['variable']);
	});
});
