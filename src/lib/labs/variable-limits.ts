import { numberedLines, type LineFault } from './numbered-lines';

export type LimitsAnswer =
	{ ok: true; variableMax: Record<string, number> } | { ok: false; faults: LineFault[] };

const linePattern = /^([A-Za-z][A-Za-z0-9_]{0,60})\s*(?:=|:|<=|≤|\s)\s*(\S+)$/;

/**
 * Reads the largest values that a rig may be asked for, one line each: the variable's name as the
 * task writes it, and a number in the task's unit.
 *
 * @example parseVariableLimits('release_speed_m_s 1.8') // { ok: true, variableMax: { release_speed_m_s: 1.8 } }
 */
export function parseVariableLimits(text: string): LimitsAnswer {
	const faults: LineFault[] = [];
	const limits = new Map<string, number>();
	for (const { number, text: line } of numberedLines(text)) {
		const match = linePattern.exec(line);
		const [, name = '', typed = ''] = match ?? [];
		const value = Number(typed);
		if (!match) {
			faults.push({ line: number, message: `“${line}” is not a name and a number.` });
		} else if (!Number.isFinite(value) || value <= 0) {
			faults.push({ line: number, message: `“${typed}” is not a number above zero.` });
		} else if (limits.has(name)) {
			faults.push({ line: number, message: `${name} has a limit already, further up.` });
		} else limits.set(name, value);
	}
	if (faults.length > 0) return { ok: false, faults };
	return { ok: true, variableMax: Object.fromEntries(limits) };
}

/** The limits in the form that `parseVariableLimits` reads. */
export function formatVariableLimits(variableMax: Record<string, number>): string {
	return Object.entries(variableMax)
		.map(([name, value]) => `${name} ${value}`)
		.join('\n');
}
