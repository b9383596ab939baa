import { canonicalJson } from './canonical-json.ts';
import { completeInputs, decideNextBlock } from './decide.ts';
import {
	decisionRecordSchema,
	type DecisionInputs,
	type DecisionInputsInput,
	type DecisionRecord,
	type DecisionVersionsInput,
	type Digest
} from './decision-record.ts';
import { findDifference, writePath, type Difference } from './find-difference.ts';
import { nameInput } from './name-input.ts';

/** Why a replay is not equal. */
export type ReplayCause =
	/** The stored copy of the inputs does not fit its stored digest. */
	| 'record-altered'
	/** The inputs as they stand now are not those that were recorded. */
	| 'input-changed'
	/** Same inputs, other engine or runtime, other answer. */
	| 'other-version'
	/** Same inputs, same engine and runtime, other answer: the stored answer was altered. */
	| 'answer-differs';

export interface NamedDifference {
	/** Where, for instance inputs.state.last.trials[3][0]. */
	readonly path: string;
	/** The same in words, for instance “trial 4, release_speed”. */
	readonly name: string;
	readonly stored: unknown;
	readonly recomputed: unknown;
}

export type Replay =
	| { equal: true; sameVersions: boolean }
	| ({
			equal: false;
			cause: ReplayCause;
			/** First difference of the answer; null: the answer would be the same. */
			answer: NamedDifference | null;
			/** Whether the answers agree in everything but rounding. */
			withinTolerance: boolean;
	  } & NamedDifference);

/** Largest relative difference of two numbers that counts as rounding on another runtime. */
const ROUNDING = 1e-9;

/**
 * Makes a stored decision again from the sources as they stand now, and names the first difference.
 *
 * @param options.stored the record as stored
 * @param options.inputs trials, memory, policy and task read from their sources
 * @throws {ZodError} a record or inputs that do not fit their schema
 */
export function replayDecision(options: {
	stored: unknown;
	inputs: DecisionInputsInput;
	versions: DecisionVersionsInput;
	digest: Digest;
}): Replay {
	const { versions, digest } = options;
	const stored = decisionRecordSchema.parse(options.stored);
	const inputs = completeInputs(options.inputs);
	const sameVersions =
		stored.engineVersion === versions.engineVersion &&
		stored.runtimeVersion === versions.runtimeVersion;
	const { engineVersion, runtimeVersion, policyHash } = stored;
	const again = decideNextBlock({
		...{ ...inputs, digest, versions: { engineVersion, runtimeVersion, policyHash } }
	});
	const answer = findDifference(answerOf(stored), answerOf(again));
	const found = findCause({ stored, inputs, digest, answer, sameVersions });
	if (!found) return { equal: true, sameVersions };
	return {
		...{ equal: false, cause: found.cause, ...describe(found.difference, inputs) },
		answer: answer && describe(answer, inputs),
		withinTolerance: isRounding(answerOf(stored), answerOf(again))
	};
}

/** Everything of a record that the engine computed. */
function answerOf({ inputs: _inputs, inputsDigest: _digest, ...rest }: DecisionRecord): unknown {
	return rest;
}

function findCause(found: {
	stored: DecisionRecord;
	inputs: DecisionInputs;
	digest: Digest;
	answer: Difference | null;
	sameVersions: boolean;
}): { cause: ReplayCause; difference: Difference } | null {
	const { stored, inputs, digest, answer, sameVersions } = found;
	const changed = findDifference(stored.inputs, inputs, ['inputs']);
	const recorded = digest(canonicalJson(stored.inputs));
	if (recorded !== stored.inputsDigest) {
		const digests = { path: ['inputsDigest'], stored: stored.inputsDigest, current: recorded };
		return { cause: 'record-altered', difference: changed ?? digests };
	}
	if (changed) return { cause: 'input-changed', difference: changed };
	if (!answer) return null;
	return { cause: sameVersions ? 'answer-differs' : 'other-version', difference: answer };
}

function describe({ path, stored, current }: Difference, inputs: DecisionInputs): NamedDifference {
	const name = nameInput(path, inputs.task);
	return { path: writePath(path), name, stored, recomputed: current };
}

/** Same shape, same words, and numbers that differ by rounding only. */
function isRounding(a: unknown, b: unknown): boolean {
	if (typeof a === 'number' && typeof b === 'number')
		return Math.abs(a - b) <= ROUNDING * Math.max(1, Math.abs(a), Math.abs(b));
	if (typeof a !== 'object' || typeof b !== 'object' || a === null || b === null) return a === b;
	const names = [...new Set([...Object.keys(a), ...Object.keys(b)])];
	return names.every((name) => isRounding(Reflect.get(a, name), Reflect.get(b, name)));
}
