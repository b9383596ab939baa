import type { Report } from '../command.ts';
import type { Verdict } from './verify-cases.ts';

/** Values that are named in a line; the others are counted. */
const FAULTS_SHOWN = 3;

/** One line a case: id, verdict, and what differs. Ends with 1 when a case fails. */
export function reportVerdicts({ verdicts }: { verdicts: readonly Verdict[] }): Report {
	const text = verdicts.map((verdict) => `${describeVerdict(verdict)}\n`).join('');
	return { text, exitCode: verdicts.some(({ verdict }) => verdict === 'fail') ? 1 : 0 };
}

function describeVerdict({ id, verdict, faults, note }: Verdict): string {
	const shown = faults.slice(0, FAULTS_SHOWN).map(describeFault);
	const rest = faults.length - shown.length;
	const parts = [...shown, ...(rest > 0 ? [`and ${rest} more`] : []), ...(note ? [note] : [])];
	const words = parts.join('; ').replace(/\s+/g, ' ');
	return [id, verdict, ...(words ? [words] : [])].join('\t');
}

function describeFault({ path, got, expected, tolerance }: Verdict['faults'][number]): string {
	const { abs, rel } = tolerance;
	const limits = [
		...(abs === undefined ? [] : [`abs ${abs}`]),
		...(rel === undefined ? [] : [`rel ${rel}`])
	];
	const allowed = limits.join(' or ') || 'exact';
	return `${path} (got ${write(got)}, expected ${write(expected)}, tolerance ${allowed})`;
}

function write(value: unknown): string {
	const text = JSON.stringify(value) ?? 'nothing';
	return text.length > 120 ? `${text.slice(0, 117)}…` : text;
}
