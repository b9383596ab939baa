import type { FindingCode } from '$scheduler/design/finding';

/** What the checker found, as the heading of its note. */
export const findingTitles: Readonly<Record<FindingCode, string>> = {
	'no-baseline': 'Too little baseline',
	'impossible-gap': 'A gap that cannot be kept',
	burden: 'More than the limits allow',
	'unequal-trials': 'Arms differ in dose',
	'unequal-rest': 'Arms differ in rest',
	'instruction-differs': 'Arms are told different things',
	'order-fixed': 'One order for everybody',
	'few-trials': 'Too few trials to decide by',
	'noise-rule': 'The rule may answer noise',
	'no-washout': 'No washout before a measure',
	'retention-early': 'Retention comes too early',
	'retention-disturbed': 'Retention is not clean'
};
