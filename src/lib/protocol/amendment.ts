import { z } from 'zod';

export const follows = ['new-people', 'in-flight'] as const;
export const renewals = ['nobody', 'visits-to-come', 'everybody'] as const;
export const withoutRenewals = ['stays', 'stops'] as const;

export type Follows = (typeof follows)[number];
export type Renewal = (typeof renewals)[number];
export type WithoutRenewal = (typeof withoutRenewals)[number];

/** What an amendment declares about the people of a running study. */
export type AmendmentTerms = {
	/** First local day on which it may act. */
	effectiveOn: string;
	follows: Follows;
	renewal: Renewal;
	withoutRenewal: WithoutRenewal;
};

export const followsOptions = [
	{
		value: 'in-flight',
		label: 'Everybody, from their next visit on',
		detail:
			'People with visits to come are moved over once the date has come; each move is recorded.'
	},
	{
		value: 'new-people',
		label: 'Only people enrolled from then on',
		detail: 'Whoever is in flight keeps the version they were enrolled under to the end.'
	}
] as const satisfies readonly { value: Follows; label: string; detail: string }[];

export const renewalOptions = [
	{ value: 'nobody', label: 'Nobody', detail: 'The consent text they signed covers the change.' },
	{
		value: 'visits-to-come',
		label: 'People with visits still to come',
		detail: 'Each stays on their version until the new text is signed and recorded.'
	},
	{
		value: 'everybody',
		label: 'Everybody who consented, also those who have finished',
		detail: 'As for new findings on risk, or another use of the data.'
	}
] as const satisfies readonly { value: Renewal; label: string; detail: string }[];

export const withoutRenewalOptions = [
	{
		value: 'stays',
		label: 'They stay on the version they signed',
		detail: 'Their visits go on as planned.'
	},
	{
		value: 'stops',
		label: 'They stop until they sign',
		detail: 'From the date on, nothing is booked or issued for them without the new consent.'
	}
] as const satisfies readonly { value: WithoutRenewal; label: string; detail: string }[];

const labelOf = <T extends string>(
	options: readonly { value: T; label: string }[],
	value: T
): string => options.find((option) => option.value === value)?.label ?? value;

/** An amendment's terms as lines to read. */
export function describeTerms(terms: AmendmentTerms): { term: string; text: string }[] {
	const renews = terms.renewal !== 'nobody';
	return [
		{ term: 'Takes effect on', text: terms.effectiveOn },
		{ term: 'Who follows it', text: labelOf(followsOptions, terms.follows) },
		{ term: 'Who consents anew', text: labelOf(renewalOptions, terms.renewal) },
		...(renews
			? [
					{
						term: 'Without a new consent',
						text: labelOf(withoutRenewalOptions, terms.withoutRenewal)
					}
				]
			: [])
	];
}

const reason = z
	.string()
	.trim()
	.min(3, 'Say in a sentence why this version is frozen')
	.max(2000, 'Longer than 2000 characters');

/** What is asked at freezing; an amendment's terms only where a version runs already. */
export const freezeSchema = z.object({
	number: z.coerce.number().int().positive(),
	revision: z.coerce.number().int().min(0),
	reason: reason.default(''),
	effectiveOn: z.union([z.iso.date('Write a date, such as 2027-03-11'), z.literal('')]).default(''),
	follows: z.enum(follows).default('in-flight'),
	renewal: z.enum(renewals).default('nobody'),
	withoutRenewal: z.enum(withoutRenewals).default('stays')
});
export type FreezeForm = z.infer<typeof freezeSchema>;
