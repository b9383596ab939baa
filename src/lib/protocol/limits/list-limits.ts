import type { RigLimit } from '../fault';
import type { ProtocolDraft } from '../protocol-draft';
import { readResultUnit } from '../../tasks/task-draft';
import { listVariables } from './task-facts';

/** One limit of a draft, with its range and what the lab's rigs allow. */
export type LimitRow = {
	field: string;
	label: string;
	unit: string;
	value: number | null;
	/** Whether a protocol must name it. */
	isNeeded: boolean;
	min: number;
	max: number;
	isWhole: boolean;
	/** What each rig allows; null: it states no such limit. */
	rigs: { name: string; allowed: number | null }[];
};

/** Every limit of a draft, in the order of its form. */
export function listLimits(
	{ limits, task }: Pick<ProtocolDraft, 'limits' | 'task'>,
	rigs: readonly RigLimit[]
): LimitRow[] {
	const whole = { isNeeded: true, min: 1, isWhole: true };
	const share = { isNeeded: false, min: 0.001, isWhole: false };
	const of = (allowed: (rig: RigLimit) => number | null | undefined) =>
		rigs.map((rig) => ({ name: rig.name, allowed: allowed(rig) ?? null }));
	return [
		{
			...{ ...whole, field: 'limits.minutesPerVisit', label: 'Minutes a visit', unit: 'min' },
			...{ value: limits.minutesPerVisit, max: 600, rigs: of((rig) => rig.minutesPerVisit) }
		},
		{
			...{ ...whole, field: 'limits.trialsPerVisit', label: 'Trials a visit', unit: 'trials' },
			...{ value: limits.trialsPerVisit, max: 20_000, rigs: of((rig) => rig.trialsPerVisit) }
		},
		{
			...{ ...share, field: 'limits.shiftMax', label: 'Target shift', unit: readResultUnit(task) },
			...{ value: limits.shiftMax, min: 1e-9, max: 1e9, rigs: of((rig) => rig.shiftMax) }
		},
		{
			...{ ...share, field: 'limits.penaltyShareMax', label: 'Penalized share', unit: '' },
			...{ value: limits.penaltyShareMax, max: 1, rigs: of((rig) => rig.penaltyShareMax) }
		},
		...listVariables(task).map(({ name, unit }) => ({
			...{ ...share, field: `limits.variableMax.${name}`, label: name, unit, min: 1e-9, max: 1e9 },
			value: limits.variableMax[name] ?? null,
			rigs: of((rig) => rig.variableMax?.[name])
		}))
	];
}

/** The most that any rig allows; null where one of them states no limit, or there is none. */
export function findWidest({ rigs }: LimitRow): { name: string; allowed: number } | null {
	let widest: { name: string; allowed: number } | null = null;
	for (const { name, allowed } of rigs) {
		if (allowed === null) return null;
		if (!widest || allowed > widest.allowed) widest = { name, allowed };
	}
	return widest;
}
