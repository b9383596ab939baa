import { z } from 'zod';
import { toPlainData } from '../policies/canonical-json.ts';
import { COMMANDS } from './commands.ts';

/** What is printed and with which code the process ends; 2 is a mistake in what was asked. */
export interface Answer {
	readonly exitCode: 0 | 2;
	readonly stdout: string;
	readonly stderr: string;
}

const USAGE = `The engine of Ovalry: one JSON object on standard input, one on standard output.

  npm run engine -- <command> < input.json
  npm run engine -- <command> --schema    what the input must look like (JSON Schema)
  npm run engine -- --help

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
	if (options.includes('--schema'))
		return done(print(z.toJSONSchema(found.schema, { io: 'input', unrepresentable: 'any' })));
	if (options.includes('--help')) return done(`${name}: ${found.about}\n`);
	const [unknown] = options;
	if (unknown) return mistake(`${name} does not know the option “${unknown}”; see --help`);
	return runOn(readInput(), (input) => found.run(input));
}

function runOn(text: string, run: (input: unknown) => unknown): Answer {
	let input: unknown;
	try {
		input = JSON.parse(text);
	} catch (error) {
		return mistake(
			`the input is not JSON: ${error instanceof Error ? error.message : 'unreadable'}`
		);
	}
	try {
		return done(print(toPlainData(run(input))));
	} catch (error) {
		if (error instanceof z.ZodError) return mistake(error.issues.map(describeIssue).join('\n'));
		if (error instanceof RangeError) return mistake(error.message);
		throw error;
	}
}

/** Where, and what is wrong there. */
function describeIssue({ path, message }: z.core.$ZodIssue): string {
	const place = path
		.map((part, i) =>
			typeof part === 'number' ? `[${part}]` : `${i === 0 ? '' : '.'}${String(part)}`
		)
		.join('');
	return `${place || 'input'}: ${message}`;
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
