import pino, { type Logger } from 'pino';
import { config } from '$lib/server/config';

let made: Logger | undefined;

/** The process's log: JSON lines on standard output, without personal data. */
export function logger(): Logger {
	made ??= pino({ level: config().LOG_LEVEL, base: undefined });
	return made;
}
