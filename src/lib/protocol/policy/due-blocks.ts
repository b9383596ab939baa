import { z } from 'zod';
import { FEEDBACKS, OBLIGED_KINDS } from '$scheduler/policies/obligation-settings';
import { draftNumber } from '../draft-parts';
import type { ProtocolDraft } from '../protocol-draft';
import { getPolicyValue, setPolicyValue } from './policy-values';

/** Moments at which a block may be due. */
export const DUE_AT = ['day-start', 'day-end', 'after', 'every'] as const;
export const ENDED = ['region', 'shift'] as const;

/** A block that is due whatever the policy would choose, while its form is being filled in. */
const dueBlockSchema = z.object({
	kind: z.enum(OBLIGED_KINDS).catch('probe'),
	at: z.enum(DUE_AT).catch('day-start'),
	/** Numbers of visits; null: every visit with adaptive time. A text is no list of numbers yet. */
	days: z
		.union([z.array(z.number()), z.string()])
		.nullable()
		.catch(null),
	gapHoursMin: draftNumber.catch(null),
	ended: z.enum(ENDED).catch('shift'),
	perturbedBlocks: draftNumber.catch(null),
	feedback: z.enum(FEEDBACKS).nullable().catch(null),
	targetOffset: draftNumber.catch(null),
	/** Only versions from elsewhere say it: due blocks are as long as all of adaptive time. */
	trials: draftNumber.catch(null)
});

export type DueBlock = z.output<typeof dueBlockSchema>;

/** What a new row opens with: a probe at the start of each practice day. */
export const usualDueBlock: DueBlock = {
	...{ kind: 'probe', at: 'day-start', days: null, gapHoursMin: 0, ended: 'shift' },
	...{ perturbedBlocks: 4, feedback: null, targetOffset: null, trials: null }
};

/** The due blocks of a draft's policy, as rows of the form. */
export function readDueBlocks(draft: Pick<ProtocolDraft, 'otherPolicy'>): DueBlock[] {
	const stored = z.array(z.looseObject({})).safeParse(getPolicyValue(draft, 'obligations'));
	return (stored.data ?? []).map((one) => {
		const when = z.looseObject({}).safeParse(one.when).data ?? {};
		return dueBlockSchema.parse({ ...one, ...when });
	});
}

/** Keeps the rows as the engine's obligations; a list without rows is taken away. */
export function writeDueBlocks(
	draft: Pick<ProtocolDraft, 'otherPolicy'>,
	rows: readonly DueBlock[]
): void {
	setPolicyValue(draft, 'obligations', rows.length > 0 ? rows.map(toObligation) : undefined);
}

function toObligation(row: DueBlock) {
	const { kind, feedback, targetOffset, trials } = row;
	return {
		...{ kind, when: toWhen(row) },
		...(trials === null ? {} : { trials }),
		...(feedback === null ? {} : { feedback }),
		...(kind === 'transfer' ? { targetOffset } : {})
	};
}

function toWhen({ at, days, gapHoursMin, ended, perturbedBlocks }: DueBlock) {
	if (at === 'day-start') return { at, days, gapHoursMin: gapHoursMin ?? 0 };
	if (at === 'day-end') return { at, days };
	return at === 'after' ? { at, ended } : { at, perturbedBlocks };
}
