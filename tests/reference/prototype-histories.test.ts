import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { chooseNextBlock } from '../../scheduler/policies/choose-next-block.ts';
import { createEmptyMemory } from '../../scheduler/policies/policy-memory.ts';
import { policySettingsSchema } from '../../scheduler/policies/policy-settings.ts';
import { policyStateSchema } from '../../scheduler/policies/policy-state.ts';
import { taskRecordSchema } from '../../scheduler/tasks/task-record.ts';
import { expectLike } from './expect-like.ts';
import { useEngineNames } from '../../scheduler/cli/verify/sheet-names.ts';

/** Twenty-two blocks each of invented people, decided by the sheet's prototype; see data/README-engine.md. */
const historySchema = z.object({
	id: z.string(),
	task: z.unknown(),
	protocol: z.looseObject({ place: z.object({ N: z.number() }) }),
	steps: z.array(
		z.object({
			state: z.record(z.string(), z.unknown()),
			decision: z.object({
				kind: z.string(),
				reasons: z.array(z.tuple([z.string(), z.string()])),
				parameters: z.unknown(),
				facts: z.unknown()
			})
		})
	)
});
const histories = z
	.array(historySchema)
	.parse(
		JSON.parse(readFileSync(new URL('data/prototype-histories.json', import.meta.url), 'utf8'))
	);

/** One trace step of .02, one or two points in 512; rounding elsewhere (12 digits are kept). */
const TOLERANCES = {
	...{ exitPlus: 0.0201, exitMinus: 0.0201, nearest: 0.0201, reachSd: 0.03 },
	...{ stay: 0.004, hit0: 0.004, nearestSuccess: 0.01 },
	...{ region: 1e-7, rule: 1e-7, parameters: 1e-7, facts: 1e-6 }
};

describe('chooseNextBlock beside the prototype', () => {
	it.each(histories)('$id: the same kinds, reasons and numbers', { timeout: 60_000 }, (history) => {
		const { place, ...others } = history.protocol;
		const protocol = policySettingsSchema.parse({
			...Object(useEngineNames(others)),
			place: { pointCount: place.N }
		});
		const task = taskRecordSchema.parse(useEngineNames(history.task));
		let memory = createEmptyMemory();
		for (const { state, decision: wanted } of history.steps) {
			const given = policyStateSchema.parse({ ...Object(useEngineNames(state)), memory });
			const decision = chooseNextBlock({ state: given, protocol, task });
			({ memory } = decision);
			expect(decision.kind).toBe(wanted.kind);
			expect(decision.reasons.map(({ rung, code }) => [rung, code])).toEqual(wanted.reasons);
			expectLike(decision.parameters, useEngineNames(wanted.parameters), TOLERANCES, [
				'parameters'
			]);
			expectLike(decision.facts, useEngineNames(wanted.facts), TOLERANCES, ['facts']);
		}
	});
});
