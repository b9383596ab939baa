import {
	blockParametersSchema,
	DECISION_KINDS,
	type BlockParameters,
	type DecisionKind
} from '$scheduler/policies/policy-memory';
import { describeKind, hasBlockToRun } from '$lib/decisions/kind-words';

export type BlockPlanToRun = { kind: string; parameters: Record<string, unknown> };
export type PlanFault = { code: 'kind' | 'parameters'; message: string };
export type ReadPlan =
	{ ok: true; kind: DecisionKind; parameters: BlockParameters } | { ok: false; fault: PlanFault };

/** Without these a rig cannot run a block of the kind; every kind has an entry. */
const needs: Readonly<Record<DecisionKind, readonly (readonly (keyof BlockParameters)[])[]>> = {
	baseline: [],
	practice: [],
	region: [['region']],
	shift: [['rule', 'levels']],
	probe: [],
	washout: [],
	retention: [],
	recovery: [],
	maintenance: [],
	clamp: [['feedback']],
	transfer: [['targetOffset']],
	rest: [],
	stop: [],
	hold: [],
	wait: []
};

/** A block as a rig must find it: of a kind that has trials, with everything that its kind needs. */
export function readPlan(plan: BlockPlanToRun): ReadPlan {
	const kind = DECISION_KINDS.find((known) => known === plan.kind);
	if (!kind) return refuse('kind', `${plan.kind} is not a kind of block.`);
	if (!hasBlockToRun(kind))
		return refuse('kind', `${describeKind(kind)}: there is nothing to run.`);
	const parsed = blockParametersSchema.safeParse(plan.parameters);
	if (!parsed.success) {
		const [issue] = parsed.error.issues;
		return refuse(
			'parameters',
			`${issue?.path.join('.') ?? ''}: ${issue?.message ?? 'unreadable'}.`
		);
	}
	const parameters = parsed.data;
	const lacks = needs[kind].find((any) => any.every((name) => parameters[name] === undefined));
	if (lacks) return refuse('parameters', `${describeKind(kind)} without ${lacks.join(' or ')}.`);
	if (parameters.feedback === 'clamped-to-noise' && parameters.clampSd === undefined)
		return refuse('parameters', 'feedback clamped to noise without its SD.');
	if (parameters.levels && parameters.levels.length < (parameters.trials ?? 0))
		return refuse('parameters', 'fewer levels of the target than trials.');
	return { ok: true, kind, parameters };
}

function refuse(code: PlanFault['code'], message: string): ReadPlan {
	return { ok: false, fault: { code, message } };
}
