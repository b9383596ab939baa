import type { Answer, Turn } from '../turn.ts';

/** Whether the person may go on at all today. */
export function askLimits({ state, settings, memory }: Turn): Answer | null {
	const { readiness, trialsToday } = state;
	const { limits } = settings;
	if (readiness.stop) return { code: 'OPERATOR-STOP', kind: 'stop' };
	if (readiness.pain >= limits.pain)
		return stop('PAIN', { pain: readiness.pain, limit: limits.pain });
	if (state.blocksLeftToday === 0) return { code: 'DAY-DONE', kind: 'stop' };
	const least = Math.min(settings.blockTrials, settings.recoveryTrials);
	if (trialsToday + least > limits.trialsPerDay)
		return stop('TRIALS-TODAY', { trials: trialsToday, limit: limits.trialsPerDay });
	if (readiness.fatigue >= limits.fatigue) {
		const kind = memory.rested ? 'stop' : 'rest';
		return { code: 'FATIGUE', kind, values: { fatigue: readiness.fatigue, limit: limits.fatigue } };
	}
	return null;
}

function stop(code: string, values: Answer['values']): Answer {
	return { code, kind: 'stop', ...(values ? { values } : {}) };
}
