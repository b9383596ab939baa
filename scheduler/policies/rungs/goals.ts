import { judgeSettling } from '../settle-verdict.ts';
import { poolBlocks } from '../summarise-block.ts';
import type { AimName } from '../policy-memory.ts';
import type { Answer, Turn } from '../turn.ts';

/** Whether an aim is met; an aim that the protocol does not have counts as met. */
export function isAimMet({ settings, memory }: Turn, aim: AimName): boolean {
	const { region, shift } = settings.aims;
	if (aim === 'region') return !region || memory.done.escapes >= region.escapes;
	return !shift || memory.done.held;
}

export function askGoals(turn: Turn): Answer | null {
	if (!isAimMet(turn, 'region') || !isAimMet(turn, 'shift')) return null;
	const { escapes, held } = turn.memory.done;
	return { code: 'MAINTENANCE', kind: 'maintenance', values: { escapes, held } };
}

/** Practice until the mean error stands still; then the last plain blocks become the reference. */
export function askSettle({ memory, settings, facts }: Turn): Answer | null {
	if (memory.settled) return null;
	const settle = judgeSettling(memory.plain, settings.settle);
	facts.settle = settle;
	const { verdict, ...numbers } = settle;
	const isLong = memory.plain.length >= settings.settle.maxBlocks;
	if (verdict === 'STEADY' || (isLong && verdict !== 'IMPROVING' && verdict !== 'FIRST-BLOCKS')) {
		memory.settled = true;
		memory.ref = poolBlocks(memory.plain.slice(-3));
		memory.suspect = 0;
		return null;
	}
	const band = memory.changed ? facts.band : {};
	const code = memory.changed ? 'CHANGED' : verdict;
	return { code, kind: 'practice', values: { ...numbers, ...band } };
}

/** Plain blocks after a perturbation. */
export function askCoolDown({ memory }: Turn): Answer | null {
	const { blocks, trials } = memory.cool;
	if (blocks === 0 && trials === 0) return null;
	return { code: 'COOL-DOWN', kind: 'practice', values: { blocks, trials } };
}

/** Nothing has changed since an offer that was not run: the same kind, the same numbers. */
export function askUnchanged(turn: Turn): Answer | null {
	const { offer } = turn.memory;
	if (offer?.kind !== 'region' && offer?.kind !== 'shift') return null;
	if (isAimMet(turn, offer.kind)) return null;
	const { kind, parameters } = offer;
	return { code: 'UNCHANGED', kind, parameters, values: { ...turn.facts.band } };
}
