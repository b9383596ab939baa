#!/usr/bin/env node
// Writes the tables of shift rule, selector, regions and simulated courses into scheduler/CALIBRATION.md.
// About ten minutes with the default counts; seeded, so the same numbers come out on every computer.
// node scripts/calibrate-policies.mjs [part of the default counts, for instance 0.1]
import { loadModule } from './calibration/load-module.mjs';
import { writeSection } from './calibration/write-section.mjs';

const part = Number(process.argv[2] ?? 1);
if (!(part > 0 && part <= 10)) throw new RangeError('the part must lie between 0 and 10');
const counts = {
	shift: Math.ceil(4000 * part),
	steady: Math.ceil(200 * part),
	escape: Math.ceil(400 * part),
	course: Math.ceil(14 * part)
};
const simulation = (name) => loadModule(`scheduler/simulation/${name}.ts`);
const { measureShift, SHIFT_LEARNERS } = await simulation('shift-characteristics');
const { measureSteadiness } = await simulation('selector-steadiness');
const { measureEscape } = await simulation('region-escape');
const { simulateStudy } = await simulation('simulate-study');
const { createCourseStudy, COURSE_TASK } = await simulation('course-groups');
const { createTask } = await loadModule('scheduler/tasks/create-task.ts');
const { taskRecordSchema } = await loadModule('scheduler/tasks/task-record.ts');
const { policySettingsSchema } = await loadModule('scheduler/policies/policy-settings.ts');
const { redundantTraitsSchema } = await loadModule('scheduler/learners/redundant-traits.ts');

const task = createTask(taskRecordSchema.parse(COURSE_TASK));
const share = (value) => value.toFixed(3).replace(/^0/, '');
const trials = (value) => (value === null ? '–' : String(value));
const table = (head, rows) =>
	[head, head.map(() => '---'), ...rows].map((cells) => `| ${cells.join(' | ')} |`).join('\n');
const say = (words) => console.error(words);

/** Numbers without and with correlated noise, side by side. */
const both = (pair, write) => pair.map(write).join(' / ');

function describeShiftRows(peopleCount) {
	const kinds = [
		{ name: 'trial by trial, 70 % hits', options: {} },
		{ name: 'trial by trial, 95 % hits', options: { toleranceSd: 1.96 } },
		{
			name: 'block by block, 70 % hits',
			options: { settings: { granularity: 'block' }, trialsMax: 900 }
		},
		{ name: 'first step ½ SD, 70 % hits', options: { settings: { firstStepSd: 0.5 } } }
	];
	return kinds.flatMap(({ name, options }) =>
		SHIFT_LEARNERS.map((learner) => {
			const pair = [0, 0.3].map((lagOne) =>
				measureShift({ learner, lagOne, peopleCount, seed: 40_000, ...options })
			);
			say(`shift: ${name}, ${learner.name}`);
			return [
				name,
				learner.name,
				both(pair, ({ passedShare }) => share(passedShare)),
				both(pair, ({ passedTrials }) => trials(passedTrials)),
				both(pair, ({ heldShare }) => share(heldShare)),
				both(pair, ({ heldTrials }) => trials(heldTrials)),
				both(pair, ({ frozenShare }) => share(frozenShare))
			];
		})
	);
}

function describeSteadyRows(peopleCount) {
	const settings = policySettingsSchema.parse({});
	const people = [
		{ name: 'long cloud', along: 1, across: 0.35, wanderSd: 0 },
		{ name: 'long cloud, means wander by .15 SD', along: 1, across: 0.35, wanderSd: 0.15 },
		{ name: 'round cloud', along: 0.5, across: 0.45, wanderSd: 0 }
	];
	return people.map(({ name, ...own }) => {
		const pair = [0, 0.3].map((lagOne) =>
			measureSteadiness({
				...{ task, settings, peopleCount, blockCount: 16, seed: 7000 },
				people: { ...own, lagOne, change: null }
			})
		);
		say(`steady: ${name}`);
		return [
			name,
			both(pair, ({ changedShare }) => share(changedShare)),
			both(pair, ({ blockCount }) => blockCount)
		];
	});
}

function describeChangeRows(peopleCount) {
	const settings = policySettingsSchema.parse({});
	const changes = [
		{ name: 'none', spread: 1, moveSd: 0 },
		{ name: 'spread × 1.25', spread: 1.25, moveSd: 0 },
		{ name: 'spread × 1.5', spread: 1.5, moveSd: 0 },
		{ name: 'mean by 1 SD', spread: 1, moveSd: 1 }
	];
	return changes.map(({ name, ...change }) => {
		const pair = [0, 0.3].map((lagOne) =>
			measureSteadiness({
				...{ task, settings, peopleCount, blockCount: 10, seed: 9000 },
				people: {
					...{ along: 1, across: 0.35, lagOne, wanderSd: 0 },
					change: { block: 8, ...change }
				}
			})
		);
		say(`change: ${name}`);
		return [name, both(pair, ({ confirmedShare }) => share(confirmedShare))];
	});
}

function describeEscapeRows(peopleCount) {
	const shares = [0.95, 0.9, 0.8, 0.7, 0.5];
	const rows = [0, 0.3, 0.6].map((exploration) => {
		const traits = redundantTraitsSchema.parse({
			...{ motorAlong: 0.9, motorAcross: 0.35, exploration, rewardRate: 1 },
			adaptation: { kind: 'single-rate', retention: 1, rate: 0.3 }
		});
		say(`escape: exploration ${exploration}`);
		const cells = shares.map((caught) =>
			share(measureEscape({ task, traits, share: caught, peopleCount, seed: 11 }).successShare)
		);
		return [exploration === 0 ? 'none' : `${exploration} of motor SD`, ...cells];
	});
	return table(['exploration', ...shares.map((caught) => `catches ${caught * 100} %`)], rows);
}

function describeCourses(peopleCount) {
	const kinds = ['practice', 'region', 'shift', 'probe', 'recovery', 'maintenance', 'hold'];
	const { groups } = simulateStudy(createCourseStudy(peopleCount));
	const percent = (value = 0) => String(Math.round(value * 100));
	const rows = groups.map((group) => [
		group.name,
		...kinds.map((kind) => percent(group.kindShares[kind])),
		group.escapesMean.toFixed(1),
		`${percent(group.heldShare)} / ${percent(group.frozenShare)}`,
		...group.sequences.slice(0, 2).map((sequence) => `\`${sequence}\``)
	]);
	return table(['people', ...kinds, 'escapes', 'held / frozen', 'one course', 'another'], rows);
}

const started = Date.now();
const { steady } = counts;
writeSection('Policies', [
	`### Shift rule\n\n${counts.shift} model people a row, goal 3 SD; spread, bias and correlation from two plain`,
	'blocks of 60; all looks, the retreat and the second try counted; trials include the 8 unshifted ones. Pairs:',
	'lag-1 correlation of the noise 0 / .3. Goal: at most 10 % of people who do not adapt pass the first step.',
	'A first step of ½ SD misses that goal and is refused by the policy check.\n',
	table(
		['rule and target', 'people', 'passed first step', 'trials', 'goal held', 'trials', 'frozen'],
		describeShiftRows(counts.shift)
	),
	`\n### Selector on people who do not change\n\n${steady} people of 16 plain blocks of 60 trials; share of the`,
	'blocks after an offer in which kind, share or place of the next block is another. Goal: at most 5 %, also with',
	'lag-1 correlation .3. Pairs as above.\n',
	table(['people', 'changed', 'blocks looked at'], describeSteadyRows(steady)),
	`\n### Selector on people who do change\n\nShare of ${steady} people whose change in the ninth block is`,
	'confirmed in it or the next one; long cloud.\n',
	table(['change', 'confirmed'], describeChangeRows(steady)),
	`\n### Success under a region\n\n${counts.escape} model people a cell, error pull .3, exploring after failure:`,
	'hits outside the region in trials 131 to 150.\n',
	describeEscapeRows(counts.escape),
	`\n### Courses side by side\n\n${counts.course} people a row, six days of four blocks, aims half and half, three`,
	'escapes and a shift of 5 SD. Percent of decisions of each kind; b baseline, P practice, R region, S shift,',
	'p probe, w washout, r recovery, M maintenance, H a person must look. No two kinds of people get the same',
	'course, and nobody practice alone. Model people, not people.\n',
	describeCourses(counts.course)
]);
say(`done in ${Math.round((Date.now() - started) / 1000)} s`);
