import { absorbPlainBlock } from './absorb-plain-block.ts';
import { absorbRegionBlock, endRegionFailed } from './absorb-region-block.ts';
import { absorbShiftBlock, restartHold } from './absorb-shift-block.ts';
import { countObligations } from './obligations.ts';
import type { LastBlock } from './policy-state.ts';
import { isPlain, type Turn } from './turn.ts';

/**
 * Writes into memory what the finished block showed. Asked again without a new block, what the last one
 * showed still stands.
 *
 * Source:  method sheet D0.
 */
export function absorbBlock(turn: Turn): void {
	const { memory } = turn;
	const { last } = turn.state;
	if (last === null) return startFromLastBlock(turn);
	memory.changed = false;
	memory.lastGates = [];
	memory.rested = last.kind === 'rest';
	if (last.kind !== 'rest') absorbExecuted(turn, last);
	countObligations(turn, last);
	const { recent, noChallenge } = memory;
	memory.sinceBlock = { recent, noChallenge };
}

/** Counts that a repeated question would count twice go back to where the last block left them. */
function startFromLastBlock({ memory, state }: Turn): void {
	if (!memory.sinceBlock || state.release) {
		memory.sinceBlock = { recent: memory.recent, noChallenge: memory.noChallenge };
		return;
	}
	memory.recent = memory.sinceBlock.recent;
	memory.noChallenge = memory.sinceBlock.noChallenge;
}

function absorbExecuted(turn: Turn, last: LastBlock): void {
	const { memory } = turn;
	countCoolDown(turn, last);
	memory.due = memory.due.filter(({ kind }) => kind !== last.kind);
	if (last.kind === 'recovery') memory.recover = null;
	if (last.kind === 'probe') memory.sinceProbe = 0;
	if (memory.active?.kind === 'shift') {
		// The gap has been taken into account, or a shift block shows more than any expectation.
		if (memory.active.beforeGap || last.kind === 'shift') delete memory.pendingGap;
		memory.active.beforeGap = null;
	}
	const isFallback = memory.planned?.kind === 'shift' && last.kind === 'practice';
	if (isFallback) restartHold(turn);
	if (isPlain(last.kind)) absorbPlainBlock(turn, last);
	else if (last.kind === 'region') absorbRegionBlock(turn, last);
	else if (last.kind === 'shift') absorbShiftBlock(turn, last);
	if (turn.state.readiness.burden) endForBurden(turn);
}

/** The operator's word counts as much as the numbers. */
function endForBurden(turn: Turn): void {
	const { memory, facts } = turn;
	if (memory.active?.kind === 'region') return endRegionFailed(turn, memory.active, 'BURDEN');
	if (memory.active?.kind !== 'shift') return;
	memory.recover = 'BURDEN';
	facts.ended = 'PAUSED';
}

function countCoolDown({ memory }: Turn, last: LastBlock): void {
	if (!isPlain(last.kind) && last.kind !== 'washout') return;
	const { blocks, trials } = memory.cool;
	memory.cool = {
		blocks: Math.max(0, blocks - 1),
		trials: Math.max(0, trials - (last.trials.length || last.errors.length))
	};
}
