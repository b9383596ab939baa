import { z } from 'zod';

const count = z.number().int().nonnegative();
const trials = z.number().int().min(1).max(2000);

/** Kinds of block that a protocol may oblige. */
export const OBLIGED_KINDS = ['probe', 'clamp', 'washout', 'retention', 'transfer'] as const;

/** What a person sees of the result of a trial. */
export const FEEDBACKS = [
	'shown',
	'hidden',
	/** The shown error is always 0, or noise of the person's own spread, whatever they do. */
	'clamped-to-zero',
	'clamped-to-noise'
] as const;

/** Days on which it is due; null: every day of adaptive time. */
const days = z.array(count).nullable().default(null);

const whenSchema = z.discriminatedUnion('at', [
	z.strictObject({
		at: z.literal('day-start'),
		days,
		/** Hours without a block that must lie before it. */
		gapHoursMin: z.number().nonnegative().default(0)
	}),
	z.strictObject({ at: z.literal('day-end'), days }),
	z.strictObject({ at: z.literal('after'), ended: z.enum(['region', 'shift']) }),
	/** After so many perturbed blocks since it last ran. */
	z.strictObject({ at: z.literal('every'), perturbedBlocks: count.min(1) })
]);

/**
 * A block that the protocol obliges, whatever the policy would choose: a probe at the start of each day,
 * error clamp, retention, washout or transfer to another target.
 */
export const obligationSchema = z
	.strictObject({
		kind: z.enum(OBLIGED_KINDS),
		when: whenSchema,
		/** Left out: as long as blocks of its kind are. */
		trials: trials.optional(),
		/** Left out: clamped to zero in a clamp, hidden in retention and transfer, else shown. */
		feedback: z.enum(FEEDBACKS).optional(),
		/** Transfer: where the other target lies beside the usual one, in the unit of the result. */
		targetOffset: z.number().optional()
	})
	.refine(({ kind, targetOffset }) => (kind === 'transfer') === Boolean(targetOffset), {
		error: 'a transfer block, and no other, needs a target offset that is not 0',
		path: ['targetOffset']
	})
	.refine(({ kind, feedback }) => kind !== 'clamp' || !feedback || feedback.startsWith('clamped'), {
		error: 'an error clamp needs clamped feedback',
		path: ['feedback']
	});

export type Obligation = z.output<typeof obligationSchema>;
export type ObligedKind = (typeof OBLIGED_KINDS)[number];
export type Feedback = (typeof FEEDBACKS)[number];

/** What is remembered of a protocol's obligations. */
export const obligationMemorySchema = z.strictObject({
	/** The day that `run` and `isStartOpen` are about. */
	day: count,
	/** No block but an obliged one has been run yet on this day. */
	isStartOpen: z.boolean(),
	/** Places in the protocol's list that have been run on this day. */
	run: z.array(count),
	/** Perturbed blocks since each last ran, one for each in the list. */
	perturbed: z.array(count)
});

export type ObligationMemory = z.output<typeof obligationMemorySchema>;

/** What a person sees in an obliged block of this kind unless the protocol says otherwise. */
export function findFeedback({ kind, feedback }: Pick<Obligation, 'kind' | 'feedback'>): Feedback {
	if (feedback) return feedback;
	if (kind === 'clamp') return 'clamped-to-zero';
	return kind === 'retention' || kind === 'transfer' ? 'hidden' : 'shown';
}
