import { findDegeneracies, type Degeneracy } from '$scheduler/tasks/find-degeneracies';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import type { Fault } from './fault';

type Values = Degeneracy['values'];
type Words = { text: (values: Values) => string; remedy: string };

const known = 'Know it when you read distances there, or narrow the ranges.';

/** Three significant digits; a list as people write it. */
function figure(value: Values[string] | undefined): string {
	if (value === undefined) return 'unknown';
	const all = typeof value === 'number' ? [value] : value;
	return all.map((one) => String(Number(one.toPrecision(3))).replace('-', '−')).join(' and ');
}

/** What the engine knows of places where a task is not as simple as elsewhere, every kind of it. */
const words: Readonly<Record<Degeneracy['code'], Words>> = {
	'velocity-free-line': {
		text: ({ alphaDeg }) =>
			`At an angle of ${figure(alphaDeg)}° the target is hit at any speed: there the angle alone counts.`,
		remedy: known
	},
	'through-center': {
		text: ({ alphaDeg }) =>
			`From ${figure(alphaDeg)}° the ball swings through the middle of the post.`,
		remedy: known
	},
	'mirror-speeds': {
		text: () => 'Without damping a speed and its opposite take the ball along the same way.',
		remedy: 'Enter a relaxation time, or allow one sign of the speed only.'
	},
	'target-inside-post': {
		text: ({ distance }) =>
			`The target lies ${figure(distance)} m from the post’s middle: the ball cannot come there.`,
		remedy: 'Move the target away from the post.'
	},
	'slowest-throw': {
		text: ({ speed, thetaDeg }) =>
			`At the slowest throw that reaches the target (${figure(speed)} m/s at ${figure(thetaDeg)}°) small changes of the angle do not count.`,
		remedy: known
	},
	'angles-too-flat': {
		text: ({ thetaDeg }) => `Throws up to ${figure(thetaDeg)}° never come to the target.`,
		remedy: 'Raise the lowest angle.'
	},
	'release-beyond-target': {
		text: ({ D }) => `The puck may be let go beyond the target, which lies at ${figure(D)} m.`,
		remedy: 'Narrow the range of the release position, or move the target.'
	},
	'push-too-weak': {
		text: ({ force }) => `A force up to ${figure(force)} N does not move the puck.`,
		remedy: 'Raise the lowest force.'
	},
	'target-below-impact': {
		text: ({ targetHeight }) =>
			`The ball may be met at or above the height to be reached, ${figure(targetHeight)} m.`,
		remedy: 'Raise the target height, or narrow the range of the impact.'
	},
	'target-out-of-reach': {
		text: ({ distance, most }) =>
			`The target lies ${figure(distance)} m away; the arm reaches up to ${figure(most)} m.`,
		remedy: 'Move the target into reach.'
	},
	'target-at-full-stretch': {
		text: ({ distance, most }) =>
			`The target lies ${figure(distance)} m away and the arm reaches ${figure(most)} m: only a stretched or folded arm comes there, so there is one way to be right.`,
		remedy: 'Move the target away from the end of the reach.'
	},
	'counted-measure': {
		text: () =>
			'This measure is counted in bins: it moves in small jumps, and its line cannot be followed.',
		remedy: 'Choose effort or smoothness where regions shall be placed.'
	},
	'no-slope': {
		text: () => 'The result depends on no variable.',
		remedy: 'Give at least one variable a weight.'
	}
};

/** Cautions about degenerate places of the task inside its ranges. */
export function findDegenerateFaults(record: TaskRecord, field: string): Fault[] {
	return findDegeneracies(record).map(({ code, values }) => ({
		code,
		level: 'caution',
		place: 'Task',
		field,
		text: words[code].text(values),
		remedy: words[code].remedy
	}));
}
