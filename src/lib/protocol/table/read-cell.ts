import { nearestWord } from '../../ui/edit-distance';
import {
	feedbackLabels,
	feedbackNamed,
	purposeLabels,
	purposeNamed,
	type BlockColumn
} from './block-columns';

/** What is wrong with a text, and what was probably meant. */
export type CellFault = { message: string; suggestion: string | null };
export type CellReading<Value> = { ok: true; value: Value } | ({ ok: false } & CellFault);

const wrong = (message: string, suggestion: string | null = null): CellReading<never> => ({
	...{ ok: false, message, suggestion }
});

/** A number with a point or a comma; null when nothing stands there. */
export function readNumber(text: string, column: BlockColumn): CellReading<number | null> {
	const typed = text.trim().replace(/^−/, '-');
	if (typed === '') return { ok: true, value: null };
	if (!/^-?(\d+([.,]\d*)?|[.,]\d+)$/.test(typed)) {
		const alone = /^(-?\d+(?:[.,]\d+)?)\s*[a-z%/]+$/i.exec(typed)?.[1] ?? null;
		return wrong(alone ? 'write the number without its unit' : 'this is no number', alone);
	}
	const value = Number(typed.replace(',', '.'));
	const isSigned = /^(center|shift|targetOffset)/.test(column.key);
	const max = column.max ?? Infinity;
	if (column.isWhole && !Number.isInteger(value)) {
		return wrong('write a whole number', String(Math.round(value)));
	}
	if (value > max || (value < 0 && !isSigned) || value < -max) {
		return wrong(`write a number from ${isSigned ? -max : 0} to ${max}`);
	}
	return { ok: true, value };
}

export function readPurpose(text: string) {
	const value = purposeNamed(text);
	if (value) return { ok: true, value } as const;
	if (text.trim() === '') return wrong('say what the block is for');
	return wrong('no kind of block is called so', nearestWord(text, purposeLabels));
}

export function readFeedback(text: string) {
	const value = feedbackNamed(text);
	if (value || text.trim() === '') return { ok: true, value } as const;
	return wrong(`write one of: ${feedbackLabels.join('; ')}`, nearestWord(text, feedbackLabels));
}
