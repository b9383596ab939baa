import { FORMULA_LENGTH_MAX } from '../task-record.ts';
import { FORMULA_FUNCTIONS, isFunctionName, type FunctionName } from './formula-functions.ts';
import { FormulaError, readTokens, type FormulaFault, type Token } from './read-tokens.ts';

export type Operator = '+' | '-' | '*' | '/' | '^';

/** Expression tree of a formula. A variable is known by its place among the task's variables. */
export type Expression =
	| { kind: 'number'; value: number }
	| { kind: 'variable'; index: number }
	| { kind: 'negate'; of: Expression }
	| { kind: 'operation'; operator: Operator; left: Expression; right: Expression }
	| { kind: 'call'; name: FunctionName; parts: Expression[] };

export type ParsedFormula =
	{ ok: true; expression: Expression } | ({ ok: false; reason: 'bad-formula' } & FormulaFault);

const DEPTH_MAX = 60;

/**
 * Reads a formula such as `x0 + v^2 / (2*mu*9.81) - 2` into an expression tree; nothing is executed.
 *
 * Grammar: + and -, then * and /, then a leading sign, then ^ (from right to left), then numbers,
 * names, brackets and the functions of formula-functions.ts; the only constant is pi.
 * @param names the variables' names, in the order of the executions
 * @example parseFormula('a * b', ['a', 'b']).ok // true
 */
export function parseFormula(text: string, names: readonly string[]): ParsedFormula {
	try {
		if (text.length > FORMULA_LENGTH_MAX)
			throw new FormulaError(
				FORMULA_LENGTH_MAX,
				`a formula may have ${FORMULA_LENGTH_MAX} characters, this one has ${text.length}`
			);
		return { ok: true, expression: new FormulaReader(readTokens(text), names).readAll() };
	} catch (error) {
		if (!(error instanceof FormulaError)) throw error;
		return { ok: false, reason: 'bad-formula', position: error.position, message: error.message };
	}
}

class FormulaReader {
	private next = 0;
	private depth = 0;
	private readonly tokens: readonly Token[];
	private readonly names: readonly string[];

	constructor(tokens: readonly Token[], names: readonly string[]) {
		this.tokens = tokens;
		this.names = names;
	}

	readAll(): Expression {
		const expression = this.readSum();
		const token = this.peek();
		if (token.kind !== 'end') throw unexpected(token, 'an operator or the end');
		return expression;
	}

	private readSum(): Expression {
		return this.readChain(['+', '-'], () => this.readProduct());
	}

	private readProduct(): Expression {
		return this.readChain(['*', '/'], () => this.readSigned());
	}

	private readChain(operators: Operator[], readPart: () => Expression): Expression {
		let left = readPart();
		for (;;) {
			const operator = operators.find((candidate) => this.take(candidate));
			if (!operator) return left;
			left = { kind: 'operation', operator, left, right: readPart() };
		}
	}

	private readSigned(): Expression {
		return this.goDeeper(() => {
			if (this.take('-')) return { kind: 'negate', of: this.readSigned() };
			if (this.take('+')) return this.readSigned();
			return this.readPower();
		});
	}

	private readPower(): Expression {
		const left = this.readPrimary();
		if (!this.take('^')) return left;
		return { kind: 'operation', operator: '^', left, right: this.readSigned() };
	}

	private readPrimary(): Expression {
		const token = this.peek();
		this.next += 1;
		if (token.kind === 'number') return { kind: 'number', value: token.value };
		if (token.kind === 'name') return this.readName(token.name, token.position);
		if (token.kind === 'symbol' && token.symbol === '(') {
			const inside = this.readSum();
			this.require(')');
			return inside;
		}
		throw unexpected(token, 'a number, a variable or a bracket');
	}

	private readName(name: string, position: number): Expression {
		const index = this.names.indexOf(name);
		if (index >= 0) return { kind: 'variable', index };
		if (isFunctionName(name)) return this.readCall(name, position);
		if (name === 'pi') return { kind: 'number', value: Math.PI };
		throw new FormulaError(
			position,
			`“${name}” is neither a variable (${this.names.join(', ')}) nor a known function`
		);
	}

	private readCall(name: FunctionName, position: number): Expression {
		this.require('(');
		const parts = [this.readSum()];
		while (this.take(',')) parts.push(this.readSum());
		this.require(')');
		const count = FORMULA_FUNCTIONS[name];
		if (parts.length !== count)
			throw new FormulaError(
				position,
				`${name} takes ${count === 1 ? 'one value' : 'two values'}, not ${parts.length}`
			);
		return { kind: 'call', name, parts };
	}

	private goDeeper(read: () => Expression): Expression {
		this.depth += 1;
		if (this.depth > DEPTH_MAX)
			throw new FormulaError(
				this.peek().position,
				`brackets and signs nest deeper than ${DEPTH_MAX}`
			);
		const expression = read();
		this.depth -= 1;
		return expression;
	}

	private peek(): Token {
		return this.tokens[this.next] ?? { kind: 'end', position: 0 };
	}

	private take(symbol: string): boolean {
		const token = this.peek();
		const isIt = token.kind === 'symbol' && token.symbol === symbol;
		if (isIt) this.next += 1;
		return isIt;
	}

	private require(symbol: string): void {
		if (!this.take(symbol)) throw unexpected(this.peek(), `“${symbol}”`);
	}
}

function unexpected(token: Token, wanted: string): FormulaError {
	return new FormulaError(token.position, `${describe(token)} stands where ${wanted} is needed`);
}

function describe(token: Token): string {
	if (token.kind === 'end') return 'the end of the formula';
	if (token.kind === 'number') return `the number ${token.value}`;
	return `“${token.kind === 'name' ? token.name : token.symbol}”`;
}
