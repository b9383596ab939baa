import { z } from 'zod';
import { taskRecordSchema } from '../tasks/task-record.ts';
import type { DecisionFacts, LadderStep, Reason } from './decision.ts';
import type { Prediction } from './predict-block.ts';
import {
	blockParametersSchema,
	DECISION_KINDS,
	EXECUTED_KINDS,
	policyMemorySchema
} from './policy-memory.ts';
import { policySettingsSchema } from './policy-settings.ts';
import { policyStateSchema } from './policy-state.ts';
import { yokedRuleSchema } from './yoking/yoked-rule.ts';

/** Which rule of an arm chooses: the adaptive policy, the block that the protocol lists, or a master. */
export const armRuleSchema = z.discriminatedUnion('kind', [
	z.strictObject({ kind: z.literal('adaptive') }),
	z.strictObject({
		kind: z.literal('fixed'),
		block: z.strictObject({
			kind: z.enum(EXECUTED_KINDS),
			parameters: blockParametersSchema.prefault({})
		})
	}),
	yokedRuleSchema
]);

/** Everything that a decision depends on, complete with all defaults. */
export const decisionInputsSchema = z.strictObject({
	state: policyStateSchema,
	protocol: policySettingsSchema.prefault({}),
	task: taskRecordSchema,
	rule: armRuleSchema.default({ kind: 'adaptive' })
});

/** By what a decision was made; hashes are those of the frozen protocol version. */
export const decisionVersionsSchema = z.strictObject({
	engineVersion: z.string().min(1),
	/** Runtime whose elementary functions were used, for instance node 20.19.5. */
	runtimeVersion: z.string().min(1),
	policyHash: z.string().nullable().default(null)
});

/** Written by the engine itself; their shape is known, their numbers are checked by replay. */
const written = <T>() => z.custom<T>((value) => typeof value === 'object' && value !== null);

/** A decision as it is stored: plain JSON, enough to make it again. */
export const decisionRecordSchema = z.strictObject({
	recordVersion: z.literal(1),
	...decisionVersionsSchema.shape,
	/** Digest of the canonical text of `inputs`. */
	inputsDigest: z.string().min(1),
	inputs: decisionInputsSchema,
	kind: z.enum(DECISION_KINDS),
	parameters: blockParametersSchema,
	reasons: z.array(written<Reason>()),
	ladder: z.array(written<LadderStep>()),
	facts: written<DecisionFacts>(),
	prediction: written<Prediction>(),
	memory: policyMemorySchema
});

export type ArmRule = z.output<typeof armRuleSchema>;
export type DecisionInputs = z.output<typeof decisionInputsSchema>;
export type DecisionInputsInput = z.input<typeof decisionInputsSchema>;
export type DecisionVersions = z.output<typeof decisionVersionsSchema>;
export type DecisionVersionsInput = z.input<typeof decisionVersionsSchema>;
export type DecisionRecord = z.output<typeof decisionRecordSchema>;
/** Makes the digest of a text, for instance SHA-256 in hex; given by the caller, the engine is pure. */
export type Digest = (canonicalText: string) => string;
