import { hasZeroInside } from '../has-zero-inside';
import { faultAt, type Fault } from '../fault';
import type { BlockDraft } from '../draft-parts';
import { hasAdaptiveTime } from '../has-adaptive-time';
import { getPolicyDefault, getPolicyValue } from '../policy/policy-values';
import type { ProtocolDraft } from '../protocol-draft';
import { readTask } from '../read-task';
import { visitName } from '../visit-name';
import { listVariables } from './task-facts';

/** What a design could ask of people beyond its own limits of shift, penalty and variables. */
export function findDoseFaults(draft: ProtocolDraft): Fault[] {
	return [
		...listAllBlocks(draft).flatMap(({ block, place, field }) => [
			...findShiftFault(block, draft, { place, field }),
			...findRegionFaults(block, draft, { place, field })
		]),
		...findShareFaults(draft),
		...findTargetFaults(draft)
	];
}

type Where = { place: string; field: string };

function listAllBlocks({ visits }: ProtocolDraft): (Where & { block: BlockDraft })[] {
	return visits.flatMap((visit, index) => {
		const lists = [
			{ field: 'blocks', list: visit.blocks },
			...Object.entries(visit.armBlocks).map(([key, list]) => ({ field: `armBlocks.${key}`, list }))
		];
		return lists.flatMap(({ field, list }) =>
			list.map((block, at) => ({
				block,
				place: `${visitName(visit, index)}, block ${at + 1}`,
				field: `visits.${index}.${field}.${at}`
			}))
		);
	});
}

function findShiftFault({ shift }: BlockDraft, { limits }: ProtocolDraft, where: Where): Fault[] {
	const far = Math.max(Math.abs(shift?.from ?? 0), Math.abs(shift?.to ?? 0));
	if (limits.shiftMax === null || far <= limits.shiftMax) return [];
	const text = `The target moves by ${far}; the protocol's limit is ${limits.shiftMax}.`;
	return [faultAt('over-shift', where, text, 'Move it less, or raise the limit.')];
}

/** Every place of a listed region must be a movement that may be asked for. */
function findRegionFaults(
	{ region }: BlockDraft,
	{ limits, task }: ProtocolDraft,
	where: Where
): Fault[] {
	if (!region) return [];
	return listVariables(task).flatMap(({ name, unit }, index): Fault[] => {
		const most = limits.variableMax[name] ?? null;
		const far = Math.abs(region.center[index] ?? 0) + (region.halfWidth[index] ?? 0);
		if (most === null || far <= most) return [];
		const text = `The region reaches ${name} ${far} ${unit}; the protocol's limit is ${most} ${unit}.`;
		return [faultAt('over-variable', where, text, 'Move or shrink it, or raise the limit.')];
	});
}

/** The hardest region that the policy may place. */
function findShareFaults(draft: ProtocolDraft): Fault[] {
	const { penaltyShareMax } = draft.limits;
	const isPlaced = hasAdaptiveTime(draft) && draft.aims.region.isOn;
	if (penaltyShareMax === null || !isPlaced) return [];
	const path = 'place.shares';
	const shares = getPolicyValue(draft, path) ?? getPolicyDefault(path);
	const hardest = Math.max(...(Array.isArray(shares) ? shares.map(Number) : []));
	if (!(hardest > penaltyShareMax)) return [];
	const where = { place: 'Policy, Placing a region', field: `policy.${path}` };
	const text = `A region may catch ${hardest} of a person's own trials; the protocol's limit is ${penaltyShareMax}.`;
	return [faultAt('over-penalty', where, text, `Take out shares above ${penaltyShareMax}.`)];
}

/** The target itself must be reached by movements that may be asked for. */
function findTargetFaults({ task, limits }: ProtocolDraft): Fault[] {
	const record = readTask(task);
	const isLimited = Object.values(limits.variableMax).some((most) => most !== null);
	if (!record || !isLimited || hasZeroInside(record) !== true) return [];
	const variables = record.variables.map((variable) => {
		const most = limits.variableMax[variable.name] ?? Number.POSITIVE_INFINITY;
		return { ...variable, min: Math.max(variable.min, -most), max: Math.min(variable.max, most) };
	});
	const isEmpty = variables.some(({ min, max }) => min >= max);
	if (!isEmpty && hasZeroInside({ ...record, variables }) !== false) return [];
	const where = { place: 'Limits', field: `limits.variableMax.${variables[0]?.name ?? ''}` };
	const text = 'No movement inside these largest values hits the target.';
	return [faultAt('target-over-limit', where, text, 'Raise them, or bring the target nearer.')];
}
