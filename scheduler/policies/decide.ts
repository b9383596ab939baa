import { createTask } from '../tasks/create-task.ts';
import { canonicalJson, toPlainData } from './canonical-json.ts';
import { chooseForTask } from './choose-next-block.ts';
import {
	decisionInputsSchema,
	decisionRecordSchema,
	decisionVersionsSchema,
	type DecisionInputs,
	type DecisionInputsInput,
	type DecisionRecord,
	type DecisionVersionsInput,
	type Digest
} from './decision-record.ts';
import type { Decision } from './decision.ts';
import { chooseFixedBlock } from './fixed-block.ts';
import { predictBlock } from './predict-block.ts';
import { chooseYokedBlock } from './yoking/yoked-block.ts';

/**
 * Decides the next block and returns the record to be stored: plain JSON with the inputs, the answer,
 * what is expected of it, and the memory for the next call. canonicalJson(record) is its stored form.
 *
 * The engine is pure: versions and the digest function are the caller's.
 * @throws {ZodError} an input that does not fit its schema, with its path
 */
export function decideNextBlock(
	options: DecisionInputsInput & { versions: DecisionVersionsInput; digest: Digest }
): DecisionRecord {
	const { versions, digest, ...given } = options;
	const inputs = completeInputs(given);
	const decision = chooseByRule(inputs);
	return toRecord({
		recordVersion: 1,
		...decisionVersionsSchema.parse(versions),
		inputs,
		inputsDigest: digest(canonicalJson(inputs)),
		...decision,
		prediction: predictBlock(decision)
	});
}

/** Inputs with every default written out, so that what was compared later is what was used. */
export function completeInputs(given: DecisionInputsInput): DecisionInputs {
	return decisionInputsSchema.parse(toPlainData(decisionInputsSchema.parse(given)));
}

function chooseByRule(inputs: DecisionInputs): Decision {
	const { rule } = inputs;
	if (rule.kind === 'fixed') return chooseFixedBlock(inputs, rule);
	if (rule.kind === 'yoked') return chooseYokedBlock(inputs, rule);
	return chooseForTask({
		state: inputs.state,
		settings: inputs.protocol,
		task: createTask(inputs.task)
	});
}

/** Plain data without shared parts, undefined or negative zeros. */
function toRecord(parts: unknown): DecisionRecord {
	return decisionRecordSchema.parse(toPlainData(parts));
}
