import type { FileProblem } from '$lib/intake/column-use';

const maxProblems = 200;

type Place = { line?: number; column?: string };

/** Faults refuse a file, warnings do not; a file full of them is told of the first two hundred. */
export class ProblemList {
	readonly faults: FileProblem[] = [];
	readonly warnings: FileProblem[];
	private suppressed = 0;

	constructor(warnings: readonly FileProblem[]) {
		this.warnings = [...warnings];
	}

	fault(code: string, message: string, place: Place = {}): void {
		if (this.faults.length < maxProblems) this.faults.push(problem(code, message, place));
		else this.suppressed += 1;
	}

	warn(code: string, message: string, place: Place = {}): void {
		if (this.warnings.length < maxProblems) this.warnings.push(problem(code, message, place));
	}

	/** Says how many faults are not listed. */
	close(): void {
		if (this.suppressed === 0) return;
		const message = `${this.suppressed} more faults of these kinds are not listed.`;
		this.faults.push(problem('more', message, {}));
	}
}

function problem(code: string, message: string, { line, column }: Place): FileProblem {
	return { code, line: line ?? null, column: column ?? null, message };
}
