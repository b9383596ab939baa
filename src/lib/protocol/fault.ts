/** Something that keeps a draft from being frozen, or (caution) that a careful colleague would ask about. */
export type Fault = {
	code: string;
	level: 'fault' | 'caution';
	/** Where, in words: 'Day 3, block 2'. */
	place: string;
	/** The form's field, as a path into the draft: 'visits.3.blocks.1.trials'. */
	field: string;
	/** What is wrong. */
	text: string;
	/** How to mend it. */
	remedy: string;
};

/** A rig as far as a protocol must fit it. */
export type RigLimit = {
	name: string;
	minutesPerVisit: number;
	trialsPerVisit: number;
	isPowered?: boolean;
	/** Left out: the rig states none. */
	variableMax?: Readonly<Record<string, number>>;
	shiftMax?: number | null;
	penaltyShareMax?: number | null;
};

type NumberRule = {
	value: number | null;
	place: string;
	field: string;
	/** As the form calls it. */
	name: string;
	unit?: string;
	min: number;
	max: number;
	isWhole?: boolean;
};

/** What is wrong with one number of a form: missing, not whole, or outside what makes sense. */
export function checkNumber(rule: NumberRule): Fault[] {
	const { value, place, field, name, min, max } = rule;
	const unit = rule.unit ? ` ${rule.unit}` : '';
	const say = (code: string, text: string, remedy: string): Fault[] => [
		{ code, level: 'fault', place, field, text, remedy }
	];
	const range = `from ${min} to ${max}${unit}`;
	if (value === null || !Number.isFinite(value)) {
		return say('number-missing', `${name} is missing.`, `Enter a number ${range}.`);
	}
	if (rule.isWhole && !Number.isInteger(value)) {
		return say('number-not-whole', `${name} is ${value}.`, `Enter a whole number ${range}.`);
	}
	if (value < min || value > max) {
		return say('number-outside', `${name} is ${value}${unit}.`, `Enter a number ${range}.`);
	}
	return [];
}

/** A text that must not stay empty. */
export function checkText(rule: {
	value: string;
	place: string;
	field: string;
	name: string;
	remedy: string;
}): Fault[] {
	if (rule.value.trim() !== '') return [];
	const { place, field, name, remedy } = rule;
	return [
		{ code: 'text-missing', level: 'fault', place, field, text: `${name} is empty.`, remedy }
	];
}

/** A fault at a place of the draft. */
export const faultAt = (
	code: string,
	where: Pick<Fault, 'place' | 'field'>,
	text: string,
	remedy: string
): Fault => ({
	code,
	level: 'fault',
	...where,
	text,
	remedy
});
