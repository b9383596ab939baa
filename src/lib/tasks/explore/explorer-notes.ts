import { createTask } from '$scheduler/tasks/create-task';
import { checkUnits } from '$scheduler/tasks/formula/check-units';
import { parseFormula } from '$scheduler/tasks/formula/parse-formula';
import {
	computeFreeTargets,
	computeTetherAlignment
} from '$scheduler/tasks/models/tether/tether-facts';
import { checkSmoothness } from '$scheduler/tasks/check-smoothness';
import { computeConditioning } from '$scheduler/tasks/conditioning';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import type { FormulaRecord, TaskRecord } from '$scheduler/tasks/task-record';
import { findDegenerateFaults } from '$lib/protocol/find-degenerate-faults';
import { formatFixed, formatShare } from '$lib/charts/format-ticks';
import type { Tone } from '$lib/ui/tone';
import { tellUnitNote } from '../unit-notes';
import { tellComparison } from './comparison-words';
import type { Explorer } from './explorer.svelte';
import { listForgivingLines } from './forgiveness-lines';
import { withUnit } from './result-words';

export interface ExplorerNote {
	readonly tone: Tone;
	readonly title: string;
	readonly text: readonly string[];
}

/** What a careful colleague would write beside this task. */
export function listNotes(explorer: Explorer): ExplorerNote[] {
	const { record } = explorer;
	return [
		...(record.type === 'tethered-ball' ? [noteFreeLine(record)] : []),
		...(record.type === 'formula' ? noteUnits(record) : []),
		...noteAxes(explorer),
		...noteLines(explorer),
		...noteDegenerate(explorer),
		...noteDirections(record),
		{
			tone: 'amber',
			title: 'Check with your own pilot',
			text: [
				`The axes are scaled by ${listScales(record)}. The trials are invented, not measured: only your own pilot can give scale, spread and direction.`
			]
		},
		...noteSource(explorer)
	];
}

function noteFreeLine(record: Extract<TaskRecord, { type: 'tethered-ball' }>): ExplorerNote {
	const { number, freeAngleDeg } = computeTetherAlignment(record);
	const free = computeFreeTargets(record);
	if (freeAngleDeg !== null)
		return {
			...{ tone: 'amber', title: 'A velocity-free line' },
			text: [
				`At ${formatFixed(freeAngleDeg, 0)}° the target is hit at any speed. There the angle alone counts, and noise of the angle is everything.`
			]
		};
	return {
		...{ tone: 'amber', title: 'No velocity-free line' },
		text: [
			`On such a line speed would not matter at all. This target’s alignment number is ${formatFixed(number, 3)} m; it would have to equal the arm, ${formatFixed(record.arm, 3)} m.`,
			`The dotted circle shows the targets that have one. The nearest is ${formatFixed(100 * free.distance, 1)} cm away; its line stands at ${formatFixed(free.freeAngleDeg, 0)}°.`
		]
	};
}

function noteUnits(record: FormulaRecord): ExplorerNote[] {
	const { variables, formula, resultUnit } = record;
	const names = variables.map(({ name }) => name);
	const parsed = parseFormula(formula, names);
	if (!parsed.ok) return [];
	const units = variables.map(({ unit }) => unit);
	const notes = checkUnits(parsed.expression, { names, units, resultUnit });
	if (notes.length === 0)
		return [
			{
				tone: 'spruce',
				title: 'Units agree',
				text: ['All terms of the formula measure the same kind of thing.']
			}
		];
	return [{ tone: 'amber', title: 'Units to look at', text: notes.map(tellUnitNote) }];
}

function noteAxes({ cloudPicture, record, systems, second }: Explorer): ExplorerNote[] {
	const system = systems.find(({ key }) => key === second);
	if (!cloudPicture || !system) return [];
	return [
		{
			...{ tone: 'iris', title: 'Axes decide about covariation' },
			text: tellComparison(cloudPicture.comparison, record, system.phrase)
		}
	];
}

function noteLines({ cloudPicture, record, axes }: Explorer): ExplorerNote[] {
	if (!cloudPicture) return [];
	const lines = listForgivingLines(cloudPicture.forgiveness, axes[1]);
	const [first] = lines;
	if (!first) return [];
	const variable = record.variables[axes[1]];
	const best = lines.reduce((top, line) => (line.best.share > top.best.share ? line : top));
	const worst = lines.reduce((low, line) => (line.best.share < low.best.share ? line : low));
	const place = `at ${variable?.name ?? ''} ${withUnit(formatFixed(best.best.x, 1), variable?.unit ?? '')}`;
	const here = `This cloud hits ${formatShare(cloudPicture.here)} where it is.`;
	const carried =
		lines.length === 1
			? `Carried along the line it would hit ${formatShare(best.best.share)} at best, ${place}.`
			: `Carried along the lines it would hit ${formatShare(best.best.share)} at best, ${place} (${best.key}); on ${worst.key} no more than ${formatShare(worst.best.share)}.`;
	const title =
		lines.length === 1 ? 'Where it is easy' : `${lines.length} lines of perfect trials, not alike`;
	return [{ tone: 'iris', title, text: [`${here} ${carried}`] }];
}

function noteDegenerate({ record, map, axes }: Explorer): ExplorerNote[] {
	const text = findDegenerateFaults(record, '')
		.filter(({ code }) => code !== 'velocity-free-line')
		.map((fault) => fault.text);
	const upright = record.variables[axes[1]];
	const share = Math.round(100 * (map?.facts.invalidShare ?? 0));
	if (map && upright && map.facts.deadBelow !== null)
		text.push(
			`Below ${withUnit(formatFixed(map.facts.deadBelow, 1), upright.unit)} no ${upright.name} of this map gives a valid trial.`
		);
	if (share > 0)
		text.push(`${share} % of the map has no valid trial; regions are not placed there.`);
	const isEmpty = map && map.zero.length === 0 && map.solutions.length === 0;
	if (isEmpty && map.facts.least > record.tolerance)
		text.push(
			'No trial of this map is perfect: widen the ranges, move the target or change what is held.'
		);
	return text.length > 0 ? [{ tone: 'amber', title: 'Degenerate places', text }] : [];
}

/** How many directions are free, and whether the task is smooth where people are. */
function noteDirections(record: TaskRecord): ExplorerNote[] {
	const task = createTask(record);
	const free = task.variableCount - task.resultCount;
	const origin = record.variables.map((variable) => variable.origin);
	const scaled = createScaledTask(task);
	const text: string[] = [];
	if (record.type === 'formula' && checkSmoothness(task, origin) === false)
		text.push(
			'The formula has a kink or a jump at the origin of the variables: slopes say little there.'
		);
	if (computeConditioning(scaled, scaled.toScaled(origin))?.isSingular)
		text.push(
			'At the origin of the variables the results nearly depend on each other: policies refuse to act there.'
		);
	if (free <= 0)
		text.push('With as many results as variables there is only one way to be right, or a few.');
	else if (free > 2)
		text.push(
			`The ways to be right run in ${free} directions; regions can be placed for one or two.`
		);
	return text.length > 0 ? [{ tone: 'amber', title: 'Directions', text }] : [];
}

function listScales({ variables }: TaskRecord): string {
	return variables
		.map(({ name, scale, unit }) => `${withUnit(String(scale), unit)} of ${name}`)
		.join(', ');
}

function noteSource({ map, record, lastMapMs }: Explorer): ExplorerNote[] {
	if (!map) return [];
	const [nx, ny] = map.facts.grid;
	const lines = [
		`${nx} × ${ny} trials, computed in ${formatFixed(map.facts.computeMs, 0)} ms in this browser. The colours darken steadily, checked for three kinds of colour blindness.`
	];
	if (record.type === 'tethered-ball')
		lines.unshift('Exact damped motion, closest pass within the time looked at.');
	if (map.facts.quality === 'coarse')
		lines.push('A coarse map: a finer one follows when nothing moves.');
	if (lastMapMs > 100)
		lines.push(
			`This model is slow: while something moves a coarser map is drawn, the last after ${formatFixed(lastMapMs, 0)} ms.`
		);
	return [{ tone: 'plain', title: 'Where it comes from', text: lines }];
}
