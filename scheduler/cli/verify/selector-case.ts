import { z } from 'zod';
import { chooseNextBlock } from '../../policies/choose-next-block.ts';
import type { Decision } from '../../policies/decision.ts';
import { createEmptyMemory } from '../../policies/policy-memory.ts';
import { policySettingsSchema } from '../../policies/policy-settings.ts';
import { policyStateSchema } from '../../policies/policy-state.ts';
import { taskRecordSchema } from '../../tasks/task-record.ts';
import { compareAnswers, type Fault } from './compare-answers.ts';
import { toEngineName, useEngineNames } from './sheet-names.ts';

/** A planted history: states one after another, the memory carried along. */
export const selectorCaseSchema = z.looseObject({
	id: z.union([z.string().min(1), z.number()]).transform(String),
	task: z.looseObject({}),
	protocol: z.looseObject({}),
	steps: z.array(z.record(z.string(), z.unknown())).min(1),
	expected: z.looseObject({
		/** Kind and deciding code after each step. */
		decisions: z.array(z.tuple([z.string(), z.string()])).optional(),
		/** After the last step. */
		final: z
			.looseObject({
				kind: z.string(),
				code: z.string(),
				parameters: z.record(z.string(), z.unknown()).optional(),
				also: z.array(z.string()).optional()
			})
			.optional()
	})
});

/** Absolute tolerances by the names of the parameters; a name without one is compared exactly. */
export const selectorToleranceSchema = z.looseObject({
	absolute: z.record(z.string(), z.number())
});

type SelectorCase = z.output<typeof selectorCaseSchema>;

/**
 * Runs a planted history through the selector and compares kinds, codes and the last parameters.
 *
 * Source:  method sheet D0.
 */
export function verifySelectorCase(
	example: SelectorCase,
	tolerance: z.output<typeof selectorToleranceSchema> | undefined
) {
	const faults = compareDecisions(runHistory(example), example.expected, tolerance?.absolute ?? {});
	const verdict = faults.length === 0 ? ('pass' as const) : ('fail' as const);
	return { verdict, faults, note: null };
}

function runHistory({ task, protocol, steps }: SelectorCase): Decision[] {
	const record = taskRecordSchema.parse(useEngineNames(task));
	const settings = policySettingsSchema.parse(useEngineNames(protocol));
	let memory = createEmptyMemory();
	return steps.map((step) => {
		const state = policyStateSchema.parse({ ...Object(useEngineNames(step)), memory });
		const decision = chooseNextBlock({ state, protocol: settings, task: record });
		memory = decision.memory;
		return decision;
	});
}

function compareDecisions(
	decisions: readonly Decision[],
	{ decisions: wanted, final }: SelectorCase['expected'],
	absolute: Readonly<Record<string, number>>
): Fault[] {
	const tolerances = new Map(
		Object.entries(absolute).map(([name, abs]) => [toEngineName(name), abs])
	);
	const toleranceAt = (path: readonly string[]) => {
		const name = path.findLast((part) => tolerances.has(part));
		return { abs: (name === undefined ? undefined : tolerances.get(name)) ?? 0 };
	};
	const got = {
		...(wanted && { decisions: decisions.map(({ kind, reasons }) => [kind, reasons[0]?.code]) }),
		...(final && { final: describeLast(decisions.at(-1)) })
	};
	const expected = {
		...(wanted && { decisions: wanted }),
		...(final && { final: { ...final, parameters: useEngineNames(final.parameters ?? {}) } })
	};
	return compareAnswers(got, expected, toleranceAt);
}

function describeLast(decision: Decision | undefined) {
	if (!decision) return undefined;
	const [first, ...others] = decision.reasons;
	const { kind, parameters } = decision;
	return { kind, code: first?.code, parameters, also: others.map(({ code }) => code) };
}
