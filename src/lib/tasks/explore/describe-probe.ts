import { entry } from '$scheduler/linear-algebra/vector';
import { createTask } from '$scheduler/tasks/create-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { isHit, type InvalidReason } from '$scheduler/tasks/task';
import { formatFixed } from '$lib/charts/format-ticks';
import { digitsFor, withUnit, writeChange, writeResult } from './result-words';
import { stepOf } from './probe-steps';
import { followTether } from './scenes/tether-scene';

export interface ProbeWords {
	/** What happens: "Passes 5.6 cm to the right of the target after 0.57 s." */
	readonly outcome: string;
	/** What a little more of each variable changes; empty where there is no slope. */
	readonly slopes: string;
	readonly isHit: boolean;
	/** Beside the probe on the map: "−5.6 cm". */
	readonly label: string;
}

const invalidWords: Readonly<Record<InvalidReason, string>> = {
	'post-hit': 'The ball swings into the post',
	'ball-at-rest': 'The ball stands still where it is nearest to the target: no side can be told.',
	'ball-not-rising': 'The ball does not leave the paddle upwards: no result.',
	'plane-not-reached': 'The ball never comes to the target’s plane: no result.',
	'push-too-weak': 'The push is too weak for friction: the puck does not start, no result.',
	'no-result': 'The task gives no number here.'
};

/** One execution in a sentence, and how it would change. */
export function describeProbe(record: TaskRecord, x: readonly number[]): ProbeWords {
	const task = createTask(record);
	const result = task.evaluate(x);
	const invalid = task.findInvalid(x);
	const hit = invalid === null && isHit(task, result);
	if (invalid !== null && invalid !== 'post-hit')
		return { outcome: invalidWords[invalid], slopes: '', isHit: false, label: 'no result' };
	const outcome =
		invalid === 'post-hit'
			? `${invalidWords[invalid]} and counts as a miss of ${writeResult(Math.abs(result), record)}.`
			: `${tellOutcome(record, x, result)}${hit ? ' A hit.' : ''}`;
	const label = task.resultCount > 1 ? writeResult(result, record) : writeChange(result, record);
	return { outcome, slopes: tellSlopes(record, x), isHit: hit, label };
}

function tellOutcome(record: TaskRecord, x: readonly number[], result: number): string {
	const size = writeResult(Math.abs(result), record);
	if (record.type !== 'tethered-ball' && !/[1-9]/.test(size.split(' ')[0] ?? ''))
		return 'Perfect, to the digits shown.';
	const side = (above: string, below: string) => (result > 0 ? above : below);
	switch (record.type) {
		case 'tethered-ball': {
			const { time, centerDistance } = followTether(record, x);
			const clear = centerDistance - record.postRadius - record.ballRadius;
			return `Passes ${size} to the ${side('left', 'right')} of the target after ${formatFixed(time, 2)} s, clear of the post by ${formatFixed(100 * clear, 0)} cm.`;
		}
		case 'projectile':
		case 'throw-height':
			return `Passes the target’s plane ${size} ${side('above', 'below')} the target.`;
		case 'throw-azimuth': {
			const [across = 0, up = 0] = createTask(record).results(x);
			const cm = (value: number) => writeResult(Math.abs(value), record);
			return `Passes ${cm(across)} to the ${across > 0 ? 'left' : 'right'} and ${cm(up)} ${up > 0 ? 'above' : 'below'} the target: ${size} away.`;
		}
		case 'puck':
		case 'puck-push':
		case 'puck-friction':
			return `The puck stops ${size} ${side('behind', 'short of')} the target.`;
		case 'paddle-bounce':
			return `The ball rises ${size} ${side('above', 'short of')} the target height.`;
		case 'two-finger':
			return `The two forces are ${size} ${side('more', 'less')} than asked for.`;
		case 'linear':
			return `The sum is ${size} ${side('above', 'below')} what is asked for.`;
		case 'arm-endpoint':
			return `The fingertip is ${size} from the target.`;
		case 'arm-x':
			return `The fingertip is ${size} ${side('beyond', 'short of')} the line.`;
		case 'cart-pendulum':
			return `The ${record.measure} is ${size} ${side('above', 'below')} what is asked for.`;
		case 'formula':
			return `The result is ${writeChange(result, record)}.`;
	}
}

/** "1.0° more: +1.2 cm." for every variable, by the step that people think in. */
function tellSlopes(record: TaskRecord, x: readonly number[]): string {
	const task = createTask(record);
	const gradient = task.gradient(x);
	if (!gradient.every(Number.isFinite)) return '';
	return record.variables
		.map((variable, i) => {
			const step = tellStep(variable.scale);
			const more = withUnit(formatFixed(step, digitsFor(step)), variable.unit);
			return `${i === 0 ? '' : `${variable.name} `}${more} more: ${writeChange(entry(gradient, i) * step, record)}.`;
		})
		.map((sentence, i) => (i === 0 ? `${record.variables[0]?.name ?? ''} ${sentence}` : sentence))
		.join(' ');
}

/** A fifth of the scale, rounded. */
function tellStep(scale: number): number {
	return 2 * stepOf({ scale });
}
