import type { PolicyMemory } from '../policy-memory.ts';
import type { Answer, Turn } from '../turn.ts';

/** Decisions whose kind comes and goes for a reason of its own are no oscillation. */
const EXPECTED = new Set([
	...['ESCAPED', 'NO-ESCAPE', 'SHIFT-HELD', 'SHIFT-FROZEN', 'PROBE-ESCAPE', 'PROBE-DUE'],
	...['WASHOUT-DUE', 'RETENTION-DUE', 'COOL-DOWN', 'SWITCH-AIM', 'BURDEN', 'MAINTENANCE'],
	...['PROBE-DECLARED', 'CLAMP-DUE', 'TRANSFER-DUE', 'CONTINUE-REGION', 'CONTINUE-SHIFT']
]);

/** Whether a person must look before anything goes on. */
export function askPerson({ memory, settings, facts }: Turn): Answer | null {
	if (memory.held) return { code: memory.held, kind: 'hold' };
	if (memory.lastGates.includes('OUTLIERS'))
		return hold('OUTLIERS', { share: facts.gates?.outlierShare ?? null });
	const returns = countReturns(memory.recent, settings.oscillation.window);
	if (returns >= settings.oscillation.returns) return hold('OSCILLATION', { returns });
	if (memory.noChallenge >= settings.stuck && !memory.stuckSeen)
		return hold('STUCK', { blocks: memory.noChallenge });
	return null;
}

function hold(code: string, values: NonNullable<Answer['values']>): Answer {
	return { code, kind: 'hold', values };
}

/** How often the kind of block went away and came straight back without an expected reason. */
export function countReturns(recent: PolicyMemory['recent'], window: number): number {
	const looked = recent.slice(-window);
	return looked.filter((now, i) => {
		const [before, earlier] = [looked[i - 1], looked[i - 2]];
		if (!before || !earlier) return false;
		if (now.kind !== earlier.kind || now.kind === before.kind) return false;
		return !EXPECTED.has(before.why) && !EXPECTED.has(now.why);
	}).length;
}
