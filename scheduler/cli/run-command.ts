import { z } from 'zod';
import { toPlainData } from '../policies/canonical-json.ts';
import type { Command } from './command.ts';
import { COMMANDS } from './commands.ts';

/** What is printed and with which code the process ends; 1: a case fails, 2: a mistake in what was asked. */
export interface Answer {
	readonly exitCode: 0 | 1 | 2;
	readonly stdout: string;
	readonly stderr: string;
}

const USAGE = `The engine of Ovalry: one JSON object on standard input, one on standard output.

  npm run -s engine -- <command> < input.json
  npm run -s engine -- <command> --schema    JSON Schema of input and output
  npm run -s engine -- --help

Commands
`;

/**
 * Runs one command on the text of standard input.
 *
 * @param readInput called only when input is needed, so that --help does not wait
 */
export function runCommand(words: readonly string[], readInput: () => string): Answer {
	const [name = '--help', ...options] = words;
	if (name === '--help' || name === '-h') return done(describeAll());
	const found = Object.hasOwn(COMMANDS, name) ? COMMANDS[name] : undefined;
	if (!found) return mistake(`there is no command “${name}”; see --help`);
	if (options.includes('--schema')) return done(print(describeShapes(found)));
	if (options.includes('--help')) return done(`${name}: ${found.about}\n${found.help?.() ?? ''}`);
	const [unknown] = options;
	if (unknown) return mistake(`${name} does not know the option “${unknown}”; see --help`);
	return runOn(readInput(), found);
}

function runOn(text: string, { run, report }: Command): Answer {
	let input: unknown;
	try {
		input = JSON.parse(text);
	} catch (error) {
		return mistake(
			`the input is not JSON: ${error instanceof Error ? error.message : 'unreadable'}`
		);
	}
	try {
		const answer = toPlainData(run(input));
		if (!report) return done(print(answer));
		const { text: stdout, exitCode } = report(answer);
		return { exitCode, stdout, stderr: '' };
	} catch (error) {
		if (error instanceof z.ZodError) return mistake(describeIssues(error.issues).join('\n'));
		if (error instanceof RangeError) return mistake(error.message);
		throw error;
	}
}

/** Where, and what is wrong there, once each. */
function describeIssues(issues: readonly z.core.$ZodIssue[]): string[] {
	const lines = issues.flatMap(findNearest).map(({ path, message }) => {
		const place = path.map(writeStep).join('');
		return `${place || 'input'}: ${message}`;
	});
	return [...new Set(lines)];
}

function writeStep(part: PropertyKey, i: number): string {
	return typeof part === 'number' ? `[${part}]` : `${i === 0 ? '' : '.'}${String(part)}`;
}

/** Of several shapes that do not fit, what is wrong with the one that fits furthest. */
function findNearest(issue: z.core.$ZodIssue): { path: PropertyKey[]; message: string }[] {
	if (issue.code !== 'invalid_union' || issue.errors.length === 0) return [issue];
	const [nearest = []] = [...issue.errors].sort((a, b) => a.length - b.length);
	return nearest
		.flatMap(findNearest)
		.map(({ path, message }) => ({ path: [...issue.path, ...path], message }));
}

/** Shapes of what a command reads and prints; what a check in code adds is not in them. */
function describeShapes({ input, output }: Command) {
	return {
		input: z.toJSONSchema(input, { io: 'input', unrepresentable: 'any' }),
		output: z.toJSONSchema(output, { io: 'output', unrepresentable: 'any' })
	};
}

function describeAll(): string {
	const width = Math.max(...Object.keys(COMMANDS).map((name) => name.length));
	const lines = Object.entries(COMMANDS).map(
		([name, { about }]) => `  ${name.padEnd(width)}  ${about}`
	);
	return `${USAGE}${lines.join('\n')}\n`;
}

function print(value: unknown): string {
	return `${JSON.stringify(value, null, '\t')}\n`;
}

function done(stdout: string): Answer {
	return { exitCode: 0, stdout, stderr: '' };
}

function mistake(text: string): Answer {
	return { exitCode: 2, stdout: '', stderr: `${text}\n` };
}
