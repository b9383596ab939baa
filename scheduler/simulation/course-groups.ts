import type { TaskRecordInput } from '../tasks/task-record.ts';
import { studySettingsSchema, type StudySettings } from './simulation-settings.ts';

/** A sliding puck with round numbers: release speed and place. */
export const COURSE_TASK: TaskRecordInput = {
	...{ type: 'puck', mu: 0.18, g: 9.81, D: 2, tolerance: 0.12 },
	variables: [
		{
			...{ name: 'release_speed', unit: 'm/s', min: 0.5, max: 4 },
			...{ origin: 2.486, scale: 0.09, resolution: 0.002 }
		},
		{
			...{ name: 'release_position', unit: 'm', min: -0.4, max: 1.1 },
			...{ origin: 0.25, scale: 0.07, resolution: 0.001 }
		}
	]
};

const LONG = { motorAlong: 0.9, motorAcross: 0.35 };
const rate = (b: number, retention = 1) => ({ kind: 'single-rate' as const, retention, rate: b });

/** People side by side whose courses should differ: fast and slow, exploring and rigid, long and round. */
const GROUPS = [
	{
		name: 'exploring, long cloud, fast',
		traits: { ...LONG, exploration: 0.5, adaptation: rate(0.2) }
	},
	{
		name: 'exploring, long cloud, slow',
		traits: { ...LONG, exploration: 0.5, adaptation: rate(0.03, 0.97) }
	},
	{
		name: 'rigid, long cloud, fast',
		traits: { ...LONG, exploration: 0.02, adaptation: rate(0.2) }
	},
	{
		name: 'rigid, long cloud, not adapting',
		traits: { ...LONG, exploration: 0.02, adaptation: rate(0) }
	},
	{
		name: 'exploring, small round cloud',
		traits: { motorAlong: 0.45, motorAcross: 0.42, exploration: 0.5, adaptation: rate(0.11) }
	},
	{
		name: 'exploring, wide round cloud',
		traits: { motorAlong: 1.5, motorAcross: 1.2, exploration: 0.5, adaptation: rate(0.11) }
	},
	{
		name: 'still improving',
		traits: {
			...LONG,
			noviceFactor: 3,
			learningTrials: 300,
			exploration: 0.5,
			adaptation: rate(0.11)
		}
	},
	{
		name: 'two rates',
		traits: { ...LONG, exploration: 0.5, adaptation: { kind: 'two-rate' as const } }
	}
];

/**
 * The study behind the table of courses: six days of four blocks, aims half and half, three escapes and a
 * shift of five SD.
 *
 * Source:  method sheet D0 (Measured, Closed loop).
 */
export function createCourseStudy(peopleCount: number, seed = 3): StudySettings {
	return studySettingsSchema.parse({
		task: COURSE_TASK,
		protocol: {
			aims: { region: { share: 0.5, escapes: 3 }, shift: { share: 0.5, goal: 5 } },
			place: { pointCount: 512 }
		},
		...{ days: 6, blocksPerDay: 4, gapHours: 23, seed },
		groups: GROUPS.map((group) => ({ ...group, count: peopleCount }))
	});
}
