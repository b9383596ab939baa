import type { z } from 'zod';

/** How the answer of a command is printed and with which code the process ends. */
export interface Report {
	readonly text: string;
	/** 1: the command ran, and what it judged does not hold. */
	readonly exitCode: 0 | 1;
}

/** One thing the engine can be asked on the command line. */
export interface Command {
	readonly about: string;
	readonly input: z.ZodType;
	/** The shape of the answer, as `--schema` prints it. */
	readonly output: z.ZodType;
	/** What `--help` says beyond the line of the command. */
	readonly help?: () => string;
	/** Prints the answer; JSON when there is nothing to say about it. */
	readonly report?: (answer: unknown) => Report;
	/** @throws {ZodError} an input that does not fit */
	run(input: unknown): unknown;
}

/** Commands of one part of the engine by their names. */
export type CommandGroup = Readonly<Record<string, Command>>;

/** A command whose input is checked before it runs. */
export function command<I extends z.ZodType, O extends z.ZodType>(
	about: string,
	{ input, output }: { input: I; output: O },
	run: (input: z.output<I>) => unknown
): Command {
	return { about, input, output, run: (given) => requireFinite(run(input.parse(given))) };
}

/**
 * JSON has no word for a number that is none: it would print null, as if nothing were known.
 *
 * @throws {RangeError} naming the first such number of the answer
 */
function requireFinite(answer: unknown): unknown {
	const path = findNonFinite(answer, []);
	if (!path) return answer;
	const place = path.join('.') || 'the answer';
	throw new RangeError(`${place} cannot be computed: these inputs are too large or too small`);
}

function findNonFinite(value: unknown, path: readonly string[]): readonly string[] | null {
	if (typeof value === 'number') return Number.isFinite(value) ? null : path;
	if (typeof value !== 'object' || value === null) return null;
	for (const [key, inner] of Object.entries(value)) {
		const found = findNonFinite(inner, [...path, key]);
		if (found) return found;
	}
	return null;
}

/** The same for an answer that is printed as lines instead of JSON. */
export function reportingCommand<I extends z.ZodType, A>(
	about: string,
	{ input, output }: { input: I; output: z.ZodType<A> },
	run: (input: z.output<I>) => A,
	{ report, help }: { report: (answer: A) => Report; help: () => string }
): Command {
	return {
		...command(about, { input, output }, run),
		help,
		report: (answer) => report(output.parse(answer))
	};
}
