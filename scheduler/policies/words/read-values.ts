import type { PolicySettings } from '../policy-settings.ts';

/** What sentences need beside the numbers of a reason. */
export interface WordContext {
	/** Unit of the task's result; may be empty. */
	readonly resultUnit: string;
	readonly settings: PolicySettings;
}

/** Numbers of a reason, ready to stand in a sentence. */
export interface ValueReader {
	/** The number, rounded; “an unknown number” when it is missing. */
	count(name: string): string;
	decimal(name: string, digits?: number): string;
	percent(name: string): string;
	/** With the unit of the result. */
	result(name: string): string;
	has(name: string): boolean;
}

export function readValues(values: unknown, { resultUnit }: WordContext): ValueReader {
	const number = (name: string) => {
		const value: unknown = Reflect.get(Object(values), name);
		return typeof value === 'number' && Number.isFinite(value) ? value : null;
	};
	const write = (name: string, form: (value: number) => string) => {
		const value = number(name);
		return value === null ? 'an unknown number' : form(value);
	};
	return {
		count: (name) => write(name, (value) => formatDecimal(value, 0)),
		decimal: (name, digits = 2) => write(name, (value) => formatDecimal(value, digits)),
		percent: (name) => write(name, formatPercent),
		result: (name) => write(name, (value) => formatResult(value, resultUnit)),
		has: (name) => number(name) !== null
	};
}

export function formatDecimal(value: number, digits: number): string {
	return value.toFixed(digits).replace('-', '−');
}

export function formatPercent(share: number): string {
	return `${formatDecimal(share * 100, 0)} %`;
}

/** Three significant digits and the unit. */
export function formatResult(value: number, unit: string): string {
	const text = Number(value.toPrecision(3)).toString().replace('-', '−');
	return unit ? `${text} ${unit}` : text;
}

/** A list as people write it. */
export function joinWords(words: readonly string[]): string {
	if (words.length < 2) return words.join('');
	return `${words.slice(0, -1).join(', ')} and ${words[words.length - 1] ?? ''}`;
}
