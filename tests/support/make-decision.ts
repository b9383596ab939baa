import { readFileSync } from 'node:fs';
import { z } from 'zod';
import { decideNextBlock } from '$scheduler/policies/decide';
import {
	decisionRecordSchema,
	type DecisionInputsInput,
	type DecisionRecord
} from '$scheduler/policies/decision-record';
import type { DecisionKind } from '$scheduler/policies/policy-memory';
import { sha256Hex } from '$lib/server/record/canonical-json';

/** Records as an engine stored them; the kinds they lack are decided here from their inputs. */
const file = new URL('../reference/data/stored-decisions.json', import.meta.url);
const stored = z
	.array(z.string())
	.parse(JSON.parse(readFileSync(file, 'utf8')))
	.map((text) => decisionRecordSchema.parse(JSON.parse(text)));

function findStored(kind: DecisionKind): DecisionRecord {
	const found = stored.find((record) => record.kind === kind);
	if (!found) throw new RangeError(`no stored decision of kind ${kind}`);
	return found;
}

function decide(inputs: DecisionInputsInput): DecisionRecord {
	const versions = { engineVersion: '1', runtimeVersion: 'node', policyHash: null };
	return decideNextBlock({ ...inputs, versions, digest: sha256Hex });
}

const practice = findStored('practice').inputs;
const onLastBlock = { ...practice.state, blocksLeftToday: 1, trialsToday: 0 };
const dayEnd = { at: 'day-end' as const };

/** Each kind by the engine itself: as stored, or by a rule of the protocol or the person's state. */
const made: Partial<Record<DecisionKind, () => DecisionRecord>> = {
	stop: () => decide({ ...practice, state: { ...practice.state, readiness: { pain: 8 } } }),
	rest: () => decide({ ...practice, state: { ...practice.state, readiness: { fatigue: 9 } } }),
	clamp: () =>
		decide({
			...practice,
			state: onLastBlock,
			protocol: {
				...practice.protocol,
				obligations: [{ kind: 'clamp', when: dayEnd, feedback: 'clamped-to-noise' }]
			}
		}),
	transfer: () =>
		decide({
			...practice,
			state: onLastBlock,
			protocol: {
				...practice.protocol,
				obligations: [{ kind: 'transfer', when: dayEnd, targetOffset: 0.2 }]
			}
		}),
	recovery: () => {
		const region = findStored('region');
		const { state } = region.inputs;
		return decide({
			...region.inputs,
			state: {
				...state,
				readiness: { burden: true },
				last: { kind: 'region', trials: state.last?.trials ?? [] },
				memory: region.memory
			}
		});
	},
	wait: () =>
		decide({
			...practice,
			rule: {
				kind: 'yoked',
				block: 1,
				nowHours: 30,
				previousEndHours: 20,
				gapMaxHours: 28,
				master: { code: 'P07', blocks: [{ scoredAtHours: 10, kind: 'practice' }] }
			}
		})
};

/** A decision of the kind, made by the engine. */
export function makeDecision(kind: DecisionKind): DecisionRecord {
	return (made[kind] ?? (() => findStored(kind)))();
}
