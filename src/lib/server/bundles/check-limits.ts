import { regionSchema } from '$scheduler/perturbations/region-settings';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import type { RigLimits } from '$lib/server/db/schema';
import type { ProtocolContent } from '$lib/protocol/protocol-content';

export type BlockPlanToRun = { kind: string; parameters: Record<string, unknown> };
export type LimitFault = { code: 'trials' | 'variable'; message: string };

type Limits = { protocol: ProtocolContent; rig: RigLimits; visitNumber: number };

/**
 * What of a block exceeds the frozen limits of the protocol or of the rig; empty when nothing does.
 * A block with a fault is never issued.
 */
export function findLimitFaults(
	plan: BlockPlanToRun,
	{ protocol, rig, visitNumber }: Limits
): LimitFault[] {
	const faults: LimitFault[] = [];
	const trials = Number(plan.parameters.trials ?? 0);
	const others = protocol.visits.find((visit) => visit.number === visitNumber)?.blocks ?? [];
	const planned = others.reduce((sum, block) => sum + block.trials, 0);
	const mostTrials = Math.min(protocol.limits.trialsPerVisit, rig.trialsPerVisit);
	if (!Number.isInteger(trials) || trials < 1 || Math.max(trials, planned) > mostTrials) {
		faults.push({
			code: 'trials',
			message: `${trials} trials; the visit's limit is ${mostTrials}.`
		});
	}
	return [...faults, ...findVariableFaults(plan, { protocol, rig })];
}

/** The region's centre must be a movement that the rig allows. */
function findVariableFaults(plan: BlockPlanToRun, { protocol, rig }: Omit<Limits, 'visitNumber'>) {
	const region = regionSchema.safeParse(plan.parameters.region);
	if (!region.success) return [];
	const { variables } = taskRecordSchema.parse(protocol.task);
	return variables.flatMap(({ name, unit }, index): LimitFault[] => {
		const value = region.data.centerInUnits?.[index] ?? 0;
		const most = rig.variableMax[name];
		if (most === undefined || Math.abs(value) <= most) return [];
		return [{ code: 'variable', message: `${name} ${value} ${unit}; the rig's limit is ${most}.` }];
	});
}
