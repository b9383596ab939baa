import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { chooseNextBlock } from '../../scheduler/policies/choose-next-block.ts';
import type { Decision } from '../../scheduler/policies/decision.ts';
import { createEmptyMemory } from '../../scheduler/policies/policy-memory.ts';
import { policySettingsSchema } from '../../scheduler/policies/policy-settings.ts';
import { policyStateSchema } from '../../scheduler/policies/policy-state.ts';
import { taskRecordSchema } from '../../scheduler/tasks/task-record.ts';
import { expectLike } from './expect-like.ts';
import { useEngineNames } from './sheet-names.ts';

/** Planted histories; expected values by the method sheet's own prototype, see data/README.md. */
const fileSchema = z.object({
	meta: z.object({ tolerance: z.object({ absolute: z.record(z.string(), z.number()) }) }),
	cases: z.array(
		z.object({
			id: z.string(),
			shows: z.string(),
			task: z.unknown(),
			protocol: z.unknown(),
			steps: z.array(z.record(z.string(), z.unknown())),
			expected: z.object({
				decisions: z.array(z.tuple([z.string(), z.string()])),
				final: z.object({
					kind: z.string(),
					code: z.string(),
					parameters: z.unknown(),
					also: z.array(z.string())
				})
			})
		})
	)
});
type Case = z.output<typeof fileSchema>['cases'][number];

const file = fileSchema.parse(
	JSON.parse(readFileSync(new URL('data/selector-cases.json', import.meta.url), 'utf8'))
);
const tolerances = z
	.record(z.string(), z.number())
	.parse(useEngineNames(file.meta.tolerance.absolute));

function runCase(example: Case): Decision[] {
	const task = taskRecordSchema.parse(useEngineNames(example.task));
	const settings = policySettingsSchema.parse(useEngineNames(example.protocol));
	let memory = createEmptyMemory();
	return example.steps.map((step) => {
		const state = policyStateSchema.parse({ ...Object(useEngineNames(step)), memory });
		const decision = chooseNextBlock({ state, protocol: settings, task });
		memory = decision.memory;
		return decision;
	});
}

describe('chooseNextBlock on planted histories', () => {
	it.each(file.cases)('$id: $shows', (example) => {
		const decisions = runCase(example);
		const { expected } = example;
		expect(decisions.map(({ kind, reasons }) => [kind, reasons[0]?.code])).toEqual(
			expected.decisions
		);
		const final = decisions.at(-1);
		expectLike(final?.parameters, useEngineNames(expected.final.parameters), tolerances);
		expect(final?.reasons.slice(1).map(({ code }) => code)).toEqual(expected.final.also);
	});
});
