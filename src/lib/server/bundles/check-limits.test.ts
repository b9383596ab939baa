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
});
