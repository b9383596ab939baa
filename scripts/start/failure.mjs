/** A fault that the person at the terminal can mend: what is wrong, and what to do about it. */
export class StartFailure extends Error {
	/**
	 * @param {string} message what is wrong, one sentence
	 * @param {string | string[]} remedy what to do, one line each
	 */
	constructor(message, remedy) {
		super(message);
		this.name = 'StartFailure';
		this.remedy = [remedy].flat();
	}
}

/** Thrown by a step that was under way when Ctrl-C came; nothing is said about it. */
export class Interrupted extends Error {}

/**
 * Words for any error, with the remedy where one is known.
 *
 * @param {unknown} error
 * @returns {string}
 */
export function describeFailure(error) {
	if (error instanceof StartFailure) {
		return [error.message, ...error.remedy.map((line) => `  ${line}`)].join('\n');
	}
	if (isDiskFull(error)) return describeFailure(diskFull());
	return error instanceof Error ? (error.stack ?? error.message) : String(error);
}

/** @param {unknown} error an error, or the output of a program */
export function isDiskFull(error) {
	if (typeof error === 'string') return /ENOSPC|No space left on device/i.test(error);
	return error instanceof Error && 'code' in error && error.code === 'ENOSPC';
}

/** @param {string} [place] the folder whose disk is full */
export function diskFull(place) {
	return new StartFailure(place ? `The disk that holds ${place} is full.` : 'The disk is full.', [
		'Free some space (Ovalry needs about 1.5 GB for itself and its packages) and start again;',
		'or put the data on another disk: OVALRY_DATA=/path/on/another/disk npm start',
		'Nothing is lost: the next start carries on where this one stopped.'
	]);
}
