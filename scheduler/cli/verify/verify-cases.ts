import { z } from 'zod';
import { compareAnswers } from './compare-answers.ts';
import {
	selectorCaseSchema,
	selectorToleranceSchema,
	verifySelectorCase
} from './selector-case.ts';
import { datasetSchema, type Answers, type Datasets } from './topic.ts';
import { findTopics } from './topics.ts';

const caseName = z.union([z.string().min(1), z.number()]).transform(String);

/** Used for a case that states none. */
const TOLERANCE_DEFAULT = { rel: 1e-9 };

const valueCaseSchema = z.looseObject({
	id: caseName,
	topic: z.string().min(1),
	inputs: z.record(z.string(), z.unknown()),
	expected: z.record(z.string(), z.unknown()),
	tolerance: z
		.looseObject({ abs: z.number().optional(), rel: z.number().optional() })
		.default(TOLERANCE_DEFAULT)
});

/** A file of numbered cases: values by topic, or histories of blocks for the selector. */
export const caseFileSchema = z.looseObject({
	meta: z.looseObject({ tolerance: selectorToleranceSchema.optional() }).optional(),
	datasets: z.record(z.string(), datasetSchema).default({}),
	cases: z.array(z.union([valueCaseSchema, selectorCaseSchema]))
});

const faultSchema = z.strictObject({
	path: z.string(),
	got: z.unknown(),
	expected: z.unknown(),
	tolerance: z.strictObject({ abs: z.number().optional(), rel: z.number().optional() })
});

export const verdictSchema = z.strictObject({
	id: z.string(),
	verdict: z.enum(['pass', 'fail', 'unsupported']),
	/** Every value that is not as expected. */
	faults: z.array(faultSchema),
	/** In words: why it is unsupported, or why nothing could be computed. */
	note: z.string().nullable()
});

export const verdictsSchema = z.strictObject({ verdicts: z.array(verdictSchema) });

export type CaseFile = z.output<typeof caseFileSchema>;
export type Verdict = z.output<typeof verdictSchema>;
type ValueCase = z.output<typeof valueCaseSchema>;

/**
 * Computes every case of a file and says which hold. What a case is, is told by its topic and by the
 * names of its inputs; its id is only printed.
 *
 * Source:  method sheet F.
 */
export function verifyCases({ meta, datasets, cases }: CaseFile): { verdicts: Verdict[] } {
	return {
		verdicts: cases.map((example) =>
			judging(example.id, () =>
				'steps' in example
					? verifySelectorCase(selectorCaseSchema.parse(example), meta?.tolerance)
					: verifyValueCase(valueCaseSchema.parse(example), datasets)
			)
		)
	};
}

function judging(id: string, verify: () => Omit<Verdict, 'id'>): Verdict {
	try {
		return { id, ...verify() };
	} catch (error) {
		if (!(error instanceof RangeError || error instanceof z.ZodError)) throw error;
		const note = error instanceof z.ZodError ? z.prettifyError(error) : error.message;
		return { id, verdict: 'fail', faults: [], note };
	}
}

function verifyValueCase(
	{ topic, inputs, expected, tolerance: { abs, rel } }: ValueCase,
	datasets: Datasets
): Omit<Verdict, 'id'> {
	const topics = findTopics(topic);
	if (topics.length === 0) return unsupported(`no topic “${topic}”`);
	const answers = topics.reduce<Answers | undefined>(
		(found, compute) => found ?? compute(inputs, datasets),
		undefined
	);
	if (!answers)
		return unsupported(`topic “${topic}” has no inputs ${Object.keys(inputs).join(', ')}`);
	const missing = Object.keys(expected).filter((name) => answers[name] === undefined);
	if (missing.length > 0) return unsupported(`does not compute ${missing.join(', ')}`);
	const faults = compareAnswers(answers, expected, () => ({ abs, rel }));
	return { verdict: faults.length === 0 ? 'pass' : 'fail', faults, note: null };
}

function unsupported(note: string): Omit<Verdict, 'id'> {
	return { verdict: 'unsupported', faults: [], note };
}
