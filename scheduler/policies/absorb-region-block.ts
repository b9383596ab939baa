import { computeEscape, type EscapeStatistics } from '../perturbations/escape-statistics.ts';
import type { ActiveBlock } from './policy-memory.ts';
import { addObligationsAfter } from './obligations.ts';
import type { LastBlock } from './policy-state.ts';
import { scaleTrials } from './scale-trials.ts';
import type { Turn } from './turn.ts';

type ActiveRegion = Extract<ActiveBlock, { kind: 'region' }>;

/** A block under a penalized region: has the person escaped, failed, or not yet decided? */
export function absorbRegionBlock(turn: Turn, last: LastBlock): void {
	const { memory, settings, task, facts } = turn;
	const active = continueRegion(turn, last);
	const { executions } = scaleTrials(task, last.trials);
	const trialCount = last.trials.length;
	memory.done.region += trialCount;
	active.trials += trialCount;
	if (trialCount < settings.blockTrials / 2 || executions.length === 0) {
		memory.lastGates = ['FEW'];
		return;
	}
	active.blocks += 1;
	memory.sinceProbe += 1;
	memory.lastChallenge = 'region';
	memory.lastShare = active.region.share;
	if (memory.avoid === 'shift') memory.avoid = null;
	const { window, z } = settings.region;
	facts.escape = computeEscape({ task, executions, region: active.region, window, z });
	judgeRegion(turn, active, facts.escape);
}

function continueRegion({ memory }: Turn, last: LastBlock): ActiveRegion {
	if (memory.active?.kind === 'region') return memory.active;
	const region = last.region ?? memory.planned?.parameters.region;
	if (!region)
		throw new RangeError('a region block was run, but neither it nor the last plan names a region');
	const active: ActiveRegion = { kind: 'region', blocks: 0, trials: 0, region };
	memory.active = active;
	memory.offer = null;
	return active;
}

function judgeRegion(turn: Turn, active: ActiveRegion, escape: EscapeStatistics): void {
	const { region } = turn.settings;
	if (escape.relativeLow >= region.relativeEscape) endEscaped(turn, active);
	else if (escape.upper < escape.stay) endRegionFailed(turn, active, 'BURDEN');
	else if (active.blocks >= region.maxBlocks) endRegionFailed(turn, active, 'NO-ESCAPE');
}

/** A probe shows the new place; the next region may be one share harder. */
function endEscaped(turn: Turn, { region }: ActiveRegion): void {
	const { memory, facts, settings } = turn;
	const { shares } = settings.place;
	const harder = shares[Math.max(0, shares.indexOf(region.share) - 1)];
	memory.done.escapes += 1;
	memory.active = null;
	memory.due.push({ kind: 'probe', why: 'PROBE-ESCAPE' });
	memory.whyProbe = ['escaped'];
	memory.cool = { ...settings.cool };
	memory.shareCap = shares.includes(region.share) && harder !== undefined ? harder : null;
	facts.ended = 'ESCAPED';
	addObligationsAfter(turn, 'region');
}

/** Recovery, and an easier region or the other aim next. */
export function endRegionFailed(turn: Turn, { region }: ActiveRegion, why: string): void {
	const { memory, facts, settings } = turn;
	const { shares } = settings.place;
	const easier = shares.filter((share) => share < region.share);
	memory.done.failed += 1;
	memory.active = null;
	memory.recover = why;
	memory.avoid = 'region';
	memory.cool = { ...settings.cool };
	memory.shareCap = easier.length > 0 ? Math.max(...easier) : Math.min(...shares);
	facts.ended = why;
	addObligationsAfter(turn, 'region');
}
