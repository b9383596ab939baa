import { readFileSync } from 'node:fs';
import { runCommand } from './run-command.ts';

/** Standard input by its number: a path would not work for pipes everywhere. */
const STANDARD_INPUT = 0;

const answer = runCommand(process.argv.slice(2), () => readFileSync(STANDARD_INPUT, 'utf8'));
process.stdout.write(answer.stdout);
process.stderr.write(answer.stderr);
process.exitCode = answer.exitCode;
