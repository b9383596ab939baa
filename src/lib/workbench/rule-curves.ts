import type { IntervalCurvesData, IntervalLine } from '$lib/charts/interval-curves';
import { formatFixed } from '$lib/charts/format-ticks';
import type { RulePoint, SimulatedShare } from '$scheduler/design/workbench/summarise-rule';

type Axis = { xLabel: string; planned: IntervalCurvesData['planned'] };

const percent = (share: number) => `${formatFixed(share * 100, share * 100 < 10 ? 1 : 0)} %`;
const whole = (trials: number) => formatFixed(trials, 0);

/** What the rule does to people in whom nothing changes. */
export function drawFalseTriggers(points: readonly RulePoint[], axis: Axis): IntervalCurvesData {
	return {
		...axis,
		yLabel: 'false triggers',
		lines: keepDrawn([
			shareLine('block after an offer, another offer', 'iris', points, (p) => p.falseChange),
			shareLine('does not adapt, passes the first step', 'persimmon', points, (p) => p.falseStep)
		]),
		goal: { y: 0.05, label: 'goal 5 %' },
		...{ write: percent, spread: '95 % interval' }
	};
}

/** How long people take to leave a region, and to follow a shift to its goal. */
export function drawTimes(points: readonly RulePoint[], axis: Axis): IntervalCurvesData {
	const timeLine = (
		name: string,
		tone: IntervalLine['tone'],
		pick: (point: RulePoint) => RulePoint['escapeTrials']
	): IntervalLine => ({
		...{ name, tone },
		points: points.flatMap((point) => {
			const trials = pick(point);
			if (!trials) return [];
			const { median, quarter, threeQuarters, people } = trials;
			const from = `${people} of ${point.people} people`;
			return [{ x: point.value, y: median, low: quarter, high: threeQuarters, from }];
		})
	});
	return {
		...axis,
		yLabel: 'trials, median',
		lines: keepDrawn([
			timeLine('until the first escape from a region', 'iris', (p) => p.escapeTrials),
			timeLine('until the goal of the shift is held', 'persimmon', (p) => p.followTrials)
		]),
		goal: null,
		...{ write: whole, spread: 'middle half' }
	};
}

/** How many get there at all, and how often somebody would have had to look. */
export function drawShares(points: readonly RulePoint[], axis: Axis): IntervalCurvesData {
	return {
		...axis,
		yLabel: 'share',
		lines: keepDrawn([
			shareLine('people who left a region', 'iris', points, (p) => p.escaped),
			shareLine('people who held the goal of the shift', 'persimmon', points, (p) => p.followed),
			shareLine('decisions that wait for a person or fall back', 'ink', points, (p) => p.holds)
		]),
		goal: null,
		...{ write: percent, spread: '95 % interval' }
	};
}

function shareLine(
	name: string,
	tone: IntervalLine['tone'],
	points: readonly RulePoint[],
	pick: (point: RulePoint) => SimulatedShare | null
): IntervalLine {
	return {
		...{ name, tone },
		points: points.flatMap((point) => {
			const found = pick(point);
			if (!found) return [];
			const { share, low, high, count, of } = found;
			return [{ x: point.value, y: share, low, high, from: `${count} of ${of}` }];
		})
	};
}

function keepDrawn(lines: readonly IntervalLine[]): IntervalLine[] {
	return lines.filter(({ points }) => points.length > 0);
}
