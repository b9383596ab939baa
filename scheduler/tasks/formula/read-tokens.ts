export type Token =
	| { kind: 'number'; value: number; position: number }
	| { kind: 'name'; name: string; position: number }
	| { kind: 'symbol'; symbol: string; position: number }
	| { kind: 'end'; position: number };

export interface FormulaFault {
	/** 0-based place in the text. */
	position: number;
	message: string;
}

/** Thrown inside the reader only; parseFormula turns it into a result. */
export class FormulaError extends Error {
	readonly position: number;
	constructor(position: number, message: string) {
		super(message);
		this.position = position;
	}
}

const NUMBER = /(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?/y;
const NAME = /[A-Za-z_][A-Za-z0-9_]*/y;
/** Signs that people paste from documents. */
const SAME_AS: Record<string, string> = { '−': '-', '·': '*', '×': '*', '÷': '/' };

/** Cuts a formula into numbers, names and signs. */
export function readTokens(text: string): Token[] {
	const tokens: Token[] = [];
	let position = 0;
	while (position < text.length) {
		const sign = text[position] ?? '';
		if (/\s/.test(sign)) position += 1;
		else {
			const { token, length } = readToken(text, position, sign);
			tokens.push(token);
			position += length;
		}
	}
	return [...tokens, { kind: 'end', position: text.length }];
}

function readToken(text: string, position: number, sign: string): { token: Token; length: number } {
	const symbol = SAME_AS[sign] ?? sign;
	if ('+-*/^(),'.includes(symbol))
		return { token: { kind: 'symbol', symbol, position }, length: 1 };
	const number = matchAt(NUMBER, text, position);
	if (number) return { token: numberToken(number, position), length: number.length };
	const name = matchAt(NAME, text, position);
	if (name) return { token: { kind: 'name', name, position }, length: name.length };
	throw new FormulaError(position, `“${sign}” cannot stand in a formula`);
}

function numberToken(text: string, position: number): Token {
	const value = Number(text);
	if (!Number.isFinite(value)) throw new FormulaError(position, `the number ${text} is too large`);
	return { kind: 'number', value, position };
}

function matchAt(pattern: RegExp, text: string, position: number): string | undefined {
	pattern.lastIndex = position;
	return pattern.exec(text)?.[0];
}
