import { COURSE_TASK } from '../simulation/course-groups.ts';
import {
	designSchema,
	plainDesignBlock,
	type Design,
	type DesignBlock,
	type DesignVisit
} from './design.ts';
import { setAt, type DesignPath } from './repair.ts';

export function block(
	purpose: DesignBlock['purpose'],
	trials: number,
	settings: Partial<DesignBlock> = {}
): DesignBlock {
	return { ...plainDesignBlock(purpose, trials), ...settings };
}

const daily = { minHours: 20, targetHours: 24, maxHours: 28, nightsBetween: 1 };
const week = { minHours: 144, targetHours: 168, maxHours: 192, nightsBetween: 6 };

export function visit(
	label: string,
	kind: DesignVisit['kind'],
	blocks: DesignBlock[],
	gapBefore: DesignVisit['gapBefore'] = daily
): DesignVisit {
	return {
		...{ label, kind, minutes: 60, setupMinutes: 15, cleanupMinutes: 10, gapBefore, blocks },
		armBlocks: {}
	};
}

/** An adaptive and a fixed arm over five visits in which the checker finds nothing. */
export function soundDesign(): Design {
	const practice = (label: string) =>
		visit(label, 'practice', [block('adaptive', 60), block('adaptive', 60)]);
	return designSchema.parse({
		task: COURSE_TASK,
		arms: [
			{ key: 'adaptive', name: 'Adaptive', rule: 'adaptive' },
			{ key: 'fixed', name: 'Fixed', rule: 'fixed' }
		],
		visits: [
			{ ...visit('Baseline', 'baseline', [block('baseline', 60)]), gapBefore: null },
			practice('Day 1'),
			practice('Day 2'),
			practice('Day 3'),
			visit('Retention', 'retention', [block('retention', 60)], week)
		],
		booking: {
			...{ earliestMinute: 480, latestMinute: 1080, sameTimeToleranceMinutes: 120 },
			weekdays: [1, 2, 3, 4, 5],
			pauses: { count: 1, minHours: 68, maxHours: 100 }
		},
		policy: {},
		limits: { minutesPerVisit: 90, trialsPerVisit: 300 },
		trialSeconds: 8
	});
}

/** The sound design with values changed at places. */
export function designWith(...changes: readonly (readonly [DesignPath, unknown])[]): Design {
	return changes.reduce(
		(design, [path, value]) => setAt(design, path, value) as Design,
		soundDesign()
	);
}

const region = { region: { center: [2.4, 0.2], halfWidth: [0.1, 0.1] } };
const shift = { shift: { from: 0, to: 0.3 } };

/** Every one of the twelve faults in one protocol. */
export function faultyDesign(): Design {
	const told = (version: string) => ({ instruction: version });
	return designWith(
		[['visits', 0, 'blocks'], [block('baseline', 5)]],
		[['arms', 1], { key: 'fixed', name: 'Fixed', rule: 'fixed', master: null }],
		[
			['visits', 1, 'armBlocks', 'fixed'],
			[
				block('region', 60, { ...region, ...told('2'), restBetweenTrialsSeconds: 3 }),
				block('shift', 70, shift),
				block('probe', 40)
			]
		],
		[
			['visits', 1, 'blocks'],
			[block('adaptive', 8, told('1')), block('adaptive', 8)]
		],
		[['policy'], { band: { q1: 0.5, q2: 0.6 } }],
		[['visits', 2, 'gapBefore'], { ...daily, nightsBetween: 5 }],
		[['visits', 3, 'minutes'], 200],
		[['visits', 4, 'gapBefore'], { ...week, minHours: 12 }],
		[['visits', 4, 'blocks'], [block('retention', 60, { feedback: 'shown' })]]
	);
}
