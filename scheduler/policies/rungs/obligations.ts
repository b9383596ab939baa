import { answerObligation, askDeclared } from '../obligations.ts';
import type { Answer, Turn } from '../turn.ts';

/** A failed region or a lost shift is followed by recovery. */
export function askRecovery({ memory, facts }: Turn): Answer | null {
	if (!memory.recover) return null;
	return { code: memory.recover, kind: 'recovery', values: { ...facts.escape } };
}

/** Blocks that the protocol or the last perturbation makes due. */
export function askObligations(turn: Turn): Answer | null {
	const { state, settings, memory } = turn;
	const isRetentionDay = state.blockInDay === 0 && settings.retentionDays.includes(state.day);
	const isGapLong = (state.gapHours ?? 0) >= settings.retentionGapHours;
	if (isRetentionDay && isGapLong && state.last?.kind !== 'retention')
		return { code: 'RETENTION-DUE', kind: 'retention', values: { gapHours: state.gapHours } };
	const atStart = askDeclared(turn, 'day-start');
	if (atStart) return atStart;
	const [due] = memory.due;
	if (due?.obligation !== undefined) return answerObligation(turn, due.obligation);
	if (due?.trials !== undefined)
		return { code: due.why, kind: due.kind, parameters: { trials: due.trials } };
	if (due) return { code: due.why, kind: due.kind };
	const declared = askDeclared(turn, 'day-end') ?? askDeclared(turn, 'every');
	if (declared) return declared;
	if (memory.active && memory.sinceProbe >= settings.probeEvery)
		return { code: 'PROBE-DUE', kind: 'probe', values: { blocks: memory.sinceProbe } };
	return null;
}
