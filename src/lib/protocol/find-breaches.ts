import type { BlockParameters } from '$scheduler/policies/policy-memory';
import type { Envelope, EnvelopeBreach } from './envelope';

export type BlockToCheck = {
	kind: string;
	parameters: BlockParameters;
	/** Trials of the visit before this block. */
	trialsBefore: number;
	/** Whether the protocol lists the block itself; else the rule or a person chose it. */
	isListed: boolean;
};

/** Distances are compared as numbers of a record, so that rounding makes no breach. */
const slack = 1e-9;

/**
 * What of a block lies outside the approved envelope; empty when nothing does. It knows nothing of the
 * code that decided, and judges only what came out.
 */
export function findBreaches(envelope: Envelope, block: BlockToCheck): EnvelopeBreach[] {
	return [
		...findDoseBreaches(envelope, block),
		...(block.isListed ? [] : findRuleBreaches(envelope, block.parameters)),
		...findLimitBreaches(envelope, block.parameters)
	];
}

function over(
	limit: string,
	unit: string,
	approved: number | null,
	found: number | null | undefined
): EnvelopeBreach[] {
	if (approved === null || found === null || found === undefined) return [];
	return found > approved + slack ? [{ limit, approved, found, unit }] : [];
}

function findDoseBreaches(envelope: Envelope, block: BlockToCheck): EnvelopeBreach[] {
	const trials = block.trialsBefore + (block.parameters.trials ?? 0);
	const { trialSeconds } = envelope;
	const minutes = trialSeconds === null ? null : (trials * trialSeconds) / 60;
	const isChallenge = block.kind === 'region' || block.kind === 'shift';
	return [
		...over('trials a visit', 'trials', envelope.trialsPerVisit, trials),
		...over('minutes a visit', 'min', envelope.minutesPerVisit, minutes),
		...(isChallenge && !block.isListed
			? over('trials of a day with challenges', 'trials', envelope.trialsPerDay, trials)
			: [])
	];
}

function findRuleBreaches(envelope: Envelope, parameters: BlockParameters): EnvelopeBreach[] {
	const { region, rule, level, step, firstStep } = parameters;
	const inSd = (value: number | undefined) =>
		rule && value !== undefined ? Math.abs(value) / rule.sigma : null;
	return [
		...over('share of a region', '', envelope.regionShare, region?.share),
		...over('way out of a region', 'SD', envelope.reachSd, region?.reachSd),
		...over('target moved', 'SD', envelope.shiftLevelSd, inSd(rule?.goal)),
		...over('target moved', 'SD', envelope.shiftLevelSd, inSd(level)),
		...over('step of the target', 'SD', envelope.shiftStepSd, rule?.stepCapSd),
		...over('step of the target', 'SD', envelope.shiftStepSd, inSd(step ?? firstStep))
	];
}

function findLimitBreaches(envelope: Envelope, parameters: BlockParameters): EnvelopeBreach[] {
	const { region, rule, level, levels = [] } = parameters;
	const distances = [rule?.goal, level, ...levels].flatMap((value) =>
		value === undefined ? [] : [Math.abs(value)]
	);
	const farthest = distances.length > 0 ? Math.max(...distances) : null;
	const center = region?.centerInUnits ?? [];
	return [
		...over('penalty', '', envelope.penaltyShare, region?.share),
		...over('target moved', envelope.resultUnit, envelope.shiftLevel, farthest),
		...envelope.names.flatMap((name, index) =>
			over(name, '', envelope.variableMax[name] ?? null, Math.abs(center[index] ?? 0))
		)
	];
}
