import { z } from 'zod';
import type { RuleExperiment, RuleOutcome } from '$scheduler/design/workbench/rule-experiment';
import { canonicalJson } from '$scheduler/policies/canonical-json';

const count = z.number().int().nonnegative();
const outcomesSchema = z.array(
	z.object({
		value: z.number(),
		person: count,
		steady: z.object({ blocks: count, changed: count }).nullable(),
		unmoved: z.object({ people: count, passed: count }).nullable(),
		escapeTrials: z.number().nullable(),
		followTrials: z.number().nullable(),
		decisions: count,
		holds: count
	})
);

const PREFIX = 'workbench-outcomes:';
/** Older experiments make room. */
const KEPT_EXPERIMENTS = 6;

type Store = Pick<Storage, 'getItem' | 'setItem' | 'removeItem' | 'key' | 'length'>;

/** What an experiment has in common with its longer self: more people or values go on from it. */
async function nameExperiment({ people: _, values: __, ...same }: RuleExperiment): Promise<string> {
	const bytes = new TextEncoder().encode(canonicalJson(same));
	const digest = await crypto.subtle.digest('SHA-256', bytes);
	const hex = [...new Uint8Array(digest)].map((byte) => byte.toString(16).padStart(2, '0'));
	return PREFIX + hex.join('').slice(0, 32);
}

/** Outcomes of an experiment that were kept in this browser; none when they cannot be read. */
export async function loadOutcomes(
	store: Store,
	experiment: RuleExperiment
): Promise<RuleOutcome[]> {
	const text = store.getItem(await nameExperiment(experiment));
	if (text === null) return [];
	try {
		return outcomesSchema.parse(JSON.parse(text));
	} catch {
		return [];
	}
}

/** Keeps outcomes so that a run goes on where it was stopped; a full store loses them, not the run. */
export async function keepOutcomes(
	store: Store,
	experiment: RuleExperiment,
	outcomes: readonly RuleOutcome[]
): Promise<void> {
	const name = await nameExperiment(experiment);
	const names = Array.from({ length: store.length }, (_, index) => store.key(index) ?? '');
	const others = names.filter((key) => key.startsWith(PREFIX) && key !== name).sort();
	for (const key of others.slice(0, Math.max(0, others.length - KEPT_EXPERIMENTS + 1))) {
		store.removeItem(key);
	}
	try {
		store.setItem(name, JSON.stringify(outcomes));
	} catch {
		store.removeItem(name);
	}
}
