import type { DecisionKind } from '$scheduler/policies/policy-memory';
import { readPuck } from '../../support/puck-protocol';

type Expected = {
	participants: {
		participant: string;
		blocks: { day: number; trials: number; decision: { kind: DecisionKind; code: string } }[];
	}[];
};

const [header = '', ...lines] = readPuck('trials.csv').trim().split('\n');
const expected = JSON.parse(readPuck('expected.json')) as Expected;

/** A trial file of one visit, each code with the trials of one of the simulated people. */
export function makeTrialFile(
	name: string,
	{ day, people }: { day: number; people: readonly { code: string; like: string }[] }
) {
	const rows = people.flatMap(({ code, like }) =>
		lines
			.filter((line) => line.startsWith(`${like},${day},`))
			.map((line) => `${code}${line.slice(like.length)}`)
	);
	return { name, text: `${[header, ...rows].join('\n')}\n`, count: rows.length };
}

/** The same file with one more column. */
export function addColumn(file: { name: string; text: string }, column: string, value: string) {
	const [first = '', ...rows] = file.text.trim().split('\n');
	const text = [`${first},${column}`, ...rows.map((row) => `${row},${value}`), ''].join('\n');
	return { ...file, text };
}

/** What the first block of somebody must lead to in the adaptive arm. */
export function expectDecision(like: string): { kind: DecisionKind; code: string } {
	const person = expected.participants.find(({ participant }) => participant === like);
	const decision = person?.blocks.find(({ day }) => day === 1)?.decision;
	if (!decision) throw new Error(`no block of ${like}`);
	return decision;
}
