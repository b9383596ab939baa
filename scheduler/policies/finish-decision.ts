import type { Decision, LadderStep, Reason } from './decision.ts';
import type { JsonObject } from './json-value.ts';
import type { BlockParameters, DecisionKind } from './policy-memory.ts';
import type { PolicySettings } from './policy-settings.ts';
import type { Answer, Turn } from './turn.ts';

const WITHOUT_CHALLENGE = ['NO-CHALLENGE', 'TWO-CLOUDS', 'SINGULAR'];

/** Turns an answer into the decision and writes into memory what was decided. */
export function finishDecision(options: {
	turn: Turn;
	rung: Reason['rung'] & LadderStep['rung'];
	answer: Answer;
	ladder: LadderStep[];
}): Decision {
	const { turn, rung, answer, ladder } = options;
	const { kind, code } = answer;
	const parameters = addTrialCount(turn.settings, kind, answer.parameters ?? {});
	const reasons = [
		{ rung, code, values: answer.values ?? {} },
		...listBlockEnd(turn, code),
		...listGates(turn, code)
	];
	rememberDecision(turn, { kind, code, parameters });
	return { kind, parameters, reasons, ladder, facts: turn.facts, memory: turn.memory };
}

function addTrialCount(
	settings: PolicySettings,
	kind: DecisionKind,
	parameters: BlockParameters
): BlockParameters {
	if (kind === 'hold') return addFallback(settings, parameters);
	if (kind === 'stop' || kind === 'wait') return parameters;
	const counts: Partial<Record<DecisionKind, number>> = {
		probe: settings.probeTrials,
		washout: settings.washoutTrials,
		retention: settings.retentionTrials,
		recovery: settings.recoveryTrials,
		rest: 0
	};
	return { ...parameters, trials: parameters.trials ?? counts[kind] ?? settings.blockTrials };
}

/** Blinded operators see a block like any other; the case waits for a person meanwhile. */
function addFallback(settings: PolicySettings, parameters: BlockParameters): BlockParameters {
	const { holdFallback: kind, blockTrials: trials } = settings;
	return kind === undefined ? parameters : { ...parameters, fallback: { kind, trials } };
}

function listBlockEnd({ facts }: Turn, code: string): Reason[] {
	if (!facts.ended || facts.ended === code) return [];
	return [{ rung: 'block-end', code: facts.ended, values: describeEnd(facts) }];
}

function describeEnd({ escape, follow }: Turn['facts']): JsonObject {
	if (escape) return { ...escape };
	if (!follow) return {};
	const { level, passed, stalls, status } = follow;
	return { level, passed, stalls, status };
}

function listGates({ memory }: Turn, code: string): Reason[] {
	return memory.lastGates
		.filter((gate) => gate !== code)
		.map((gate) => ({ rung: 'data', code: gate, values: {} }));
}

function rememberDecision(
	turn: Turn,
	decided: { kind: DecisionKind; code: string; parameters: BlockParameters }
): void {
	const { memory, settings } = turn;
	const { kind, code, parameters } = decided;
	rememberGap(turn, kind);
	const isChallenge = kind === 'region' || kind === 'shift';
	if (isChallenge || kind === 'practice')
		memory.recent = [...memory.recent, { kind, why: code }].slice(-settings.oscillation.window);
	if (WITHOUT_CHALLENGE.includes(code)) memory.noChallenge += 1;
	else if (isChallenge) memory.noChallenge = 0;
	if (kind === 'hold') memory.held = code;
	if (isChallenge && !memory.active) memory.offer = { kind, parameters };
	else if (!isChallenge && !(memory.offer && memory.settled)) memory.offer = null;
	memory.planned = { kind, parameters };
}

/** Another block comes first after a gap: the running shift still has to be taken back for it. */
function rememberGap({ memory, state, settings }: Turn, kind: DecisionKind): void {
	if (!(settings.forget.beforeAnyBlock ?? settings.obligations !== undefined)) return;
	const isRun = kind !== 'shift' && kind !== 'stop' && kind !== 'hold' && kind !== 'wait';
	if (!isRun || memory.active?.kind !== 'shift' || !state.gapHours) return;
	if (memory.pendingGap?.day === state.day) return;
	const hours = (memory.pendingGap?.hours ?? 0) + state.gapHours;
	memory.pendingGap = { day: state.day, hours };
}
