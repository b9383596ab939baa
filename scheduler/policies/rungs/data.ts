import type { JsonObject } from '../json-value.ts';
import type { Answer, Turn } from '../turn.ts';

/** Whether the last block's trials can carry a choice. */
export function askData(turn: Turn): Answer | null {
	for (const code of turn.memory.lastGates) {
		if (code === 'FEW') return repeatSameKind(turn);
		if (code === 'SINGULAR' || code === 'DRIFT') return practise(turn, code);
		if (code === 'BIMODAL') return practise(turn, 'TWO-CLOUDS');
	}
	return turn.memory.cloud === null ? { code: 'NO-BASELINE', kind: 'baseline' } : null;
}

function repeatSameKind({ state, memory, facts }: Turn): Answer {
	const kind = state.last?.kind ?? 'baseline';
	const parameters = memory.planned?.kind === kind ? memory.planned.parameters : {};
	return { code: 'FEW', kind, parameters, values: { n: facts.gates?.n ?? null } };
}

function practise({ facts }: Turn, code: string): Answer {
	const { codes: _codes, ...statistics } = facts.gates ?? { codes: [] };
	const values: JsonObject = { statistics };
	return { code, kind: 'practice', values };
}

/** The cloud lies beside the solutions: no perturbation until the person hits again. */
export function askTarget({ memory, task }: Turn): Answer | null {
	if (!memory.lastGates.includes('OFF')) return null;
	const values = { fMean: memory.cloud?.fMean ?? null, limit: 2 * task.tolerance };
	return { code: 'OFF', kind: 'practice', values };
}
