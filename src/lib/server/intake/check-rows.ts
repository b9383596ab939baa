import type { FileProblem, Mapping } from '$lib/intake/column-use';
import { ProblemList } from './problem-list';
import { readColumns } from './read-columns';
import { readRow, type ReadTrial } from './read-row';
import type { Table } from './read-table';
import type { Roster } from './roster';

export type TrialRow = { number: number; execution: (number | null)[] };
export type CheckedBlock = {
	code: string;
	visitNumber: number;
	blockNumber: number;
	plannedTrialCount: number;
	trials: TrialRow[];
};
export type CheckedFile = {
	blocks: CheckedBlock[];
	rowCount: number;
	/** Anything here and nothing is stored. */
	faults: FileProblem[];
	warnings: FileProblem[];
	/** Blank values by variable. */
	blankCounts: Record<string, number>;
};

/**
 * Reads every row by the mapping and checks it against who is expected on which visit. One fault in
 * one row refuses the file as a whole, so that nothing is half imported.
 */
export function checkRows(table: Table, mapping: Mapping, roster: Roster): CheckedFile {
	const problems = new ProblemList(table.warnings);
	const columns = readColumns(table.header, { mapping, roster, problems });
	const task = { columns, mapping, roster, problems };
	const trials =
		problems.faults.length > 0
			? []
			: table.rows.map((row) => readRow(task, row)).filter((trial) => trial !== null);
	const blocks = gatherBlocks(trials);
	const blankCounts = countBlanks(trials, roster);
	if (problems.faults.length === 0) {
		for (const block of blocks) checkBlock(block, problems);
		warnOfBlanks(blankCounts, problems);
	}
	problems.close();
	const { faults, warnings } = problems;
	return {
		blocks: faults.length > 0 ? [] : blocks,
		rowCount: table.rows.length,
		faults,
		warnings,
		blankCounts
	};
}

function gatherBlocks(trials: readonly ReadTrial[]): CheckedBlock[] {
	const blocks = new Map<string, CheckedBlock>();
	for (const { number, execution, ...key } of trials) {
		const id = `${key.code}\u0000${key.visitNumber}\u0000${key.blockNumber}`;
		const block = blocks.get(id) ?? { ...key, trials: [] };
		blocks.set(id, block);
		block.trials.push({ number, execution });
	}
	return [...blocks.values()];
}

function countBlanks(trials: readonly ReadTrial[], { variables }: Roster): Record<string, number> {
	const counts = variables.map(({ name }, position) => {
		const blanks = trials.filter(({ execution }) => execution[position] === null);
		return [name, blanks.length] as const;
	});
	return Object.fromEntries(counts.filter(([, count]) => count > 0));
}

/** Puts a block's trials in order; a number twice is a fault, a gap or another count a warning. */
function checkBlock(block: CheckedBlock, problems: ProblemList): void {
	const inOrder = [...block.trials].sort((a, b) => a.number - b.number);
	const where = `${block.code}, visit ${block.visitNumber}, block ${block.blockNumber}`;
	const twice = inOrder.find((trial, index) => inOrder[index + 1]?.number === trial.number);
	if (twice) {
		const message = `${where}: trial ${twice.number} stands in the file twice.`;
		return problems.fault('trial-twice', message);
	}
	if (inOrder.some((trial, index) => trial !== block.trials[index])) {
		const message = `${where}: rows were put in the order of trials.`;
		problems.warn('rows-not-in-trial-order', message);
	}
	block.trials = inOrder;
	const missing = findMissing(inOrder);
	if (missing.length > 0) {
		const listed = `${missing.slice(0, 20).join(', ')}${missing.length > 20 ? ' …' : ''}`;
		problems.warn('trial-gap', `${where}: trials ${listed} are missing. They are not filled.`);
	}
	if (inOrder.length !== block.plannedTrialCount) {
		const message = `${where}: ${inOrder.length} trials; the protocol plans ${block.plannedTrialCount}.`;
		problems.warn('trial-count', message);
	}
}

function findMissing(inOrder: readonly TrialRow[]): number[] {
	const present = new Set(inOrder.map((trial) => trial.number));
	const first = inOrder[0]?.number ?? 1;
	const count = (inOrder.at(-1)?.number ?? 0) - first + 1;
	return Array.from({ length: count }, (_, index) => first + index).filter((n) => !present.has(n));
}

function warnOfBlanks(counts: Record<string, number>, problems: ProblemList): void {
	for (const [column, count] of Object.entries(counts)) {
		const message = `${column} is blank in ${count} trials. They are stored as blank and left out of the cloud.`;
		problems.warn('blank-values', message, { column });
	}
}
