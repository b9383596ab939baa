import { readFileSync } from 'node:fs';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { useEngineNames } from '../../scheduler/cli/verify/sheet-names';

const folder = new URL('../data/puck_blocks/', import.meta.url);
export const readPuck = (name: string) => readFileSync(new URL(name, folder), 'utf8');

/** The protocol behind the simulated sliding-puck blocks: two visits of one block each. */
export function createPuckProtocol(): ProtocolContent {
	const visit = (number: number, kind: 'baseline' | 'practice') => ({
		number,
		label: kind === 'baseline' ? 'Baseline' : `Day ${number - 1}`,
		kind,
		minutes: 30,
		setupMinutes: 15,
		cleanupMinutes: 15,
		gapBefore:
			number === 1 ? null : { minHours: 20, targetHours: 24, maxHours: 28, nightsBetween: 1 },
		blocks: [
			{
				number: 1,
				purpose: kind === 'baseline' ? ('baseline' as const) : ('adaptive' as const),
				trials: 60
			}
		]
	});
	const expected = JSON.parse(readPuck('expected.json')) as { protocol: unknown };
	return {
		format: 1,
		task: useEngineNames(JSON.parse(readPuck('task.json'))) as ProtocolContent['task'],
		arms: [
			{ key: 'adaptive', name: 'Adaptive', rule: 'adaptive' },
			{ key: 'fixed', name: 'Fixed', rule: 'fixed' }
		],
		visits: [visit(1, 'baseline'), visit(2, 'practice'), visit(3, 'practice')],
		booking: {
			earliestMinute: 480,
			latestMinute: 1200,
			sameTimeToleranceMinutes: 120,
			weekdays: [1, 2, 3, 4, 5],
			pauses: { count: 1, minHours: 68, maxHours: 100 }
		},
		policy: useEngineNames(expected.protocol) as ProtocolContent['policy'],
		guardRails: { automaticCoverMax: 0.6, automaticReachSdMax: 4, fallback: 'practice' },
		readyLeadHours: 12,
		invitationDelayHours: 24,
		earliestStartHours: { min: 20, max: 30 },
		comparison: {
			outcome: 'retention error',
			armA: 'adaptive',
			armB: 'fixed',
			effectD: 0.8,
			effectSource: 'assumed',
			alpha: 0.05,
			sides: 2,
			peoplePerArm: 8,
			peopleLostShare: 0.1,
			effectLostShare: 0.15
		},
		limits: { minutesPerVisit: 60, trialsPerVisit: 300 },
		consentTextVersion: '1',
		variants: []
	};
}
