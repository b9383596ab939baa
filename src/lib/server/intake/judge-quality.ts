import type { CheckedBlock } from './check-rows';
import type { Roster } from './roster';

export type Quality = { verdict: 'green' | 'amber' | 'red'; codes: string[] };

/** Shares from which a block is amber or red: common practice of the trade, the same in every arm. */
const amberShare = 0.05;
const redShare = 0.2;
const redCountShare = 0.5;

/**
 * Technical verdict on one block: count, blanks, out of range, stuck sensor. Computed without arm
 * and without knowing what kind of block it was.
 */
export function judgeQuality(block: CheckedBlock, variables: Roster['variables']): Quality {
	const count = block.trials.length;
	const blankShare = share(block, (trial) => trial.execution.some((value) => value === null));
	const outShare = share(block, (trial) =>
		trial.execution.some((value, i) => isOutside(value, variables[i]))
	);
	const countShare = count / block.plannedTrialCount;
	const isStuck = count >= 3 && variables.some((_, i) => isConstant(block, i));
	const codes = [
		...(countShare < 1 || countShare > 1 ? ['count'] : []),
		...(blankShare > 0 ? ['missing'] : []),
		...(outShare > 0 ? ['out-of-range'] : []),
		...(isStuck ? ['stuck'] : [])
	];
	const isRed =
		isStuck || countShare < redCountShare || blankShare > redShare || outShare > redShare;
	const isAmber = countShare !== 1 || blankShare > amberShare || outShare > amberShare;
	return { verdict: isRed ? 'red' : isAmber ? 'amber' : 'green', codes };
}

type Trial = CheckedBlock['trials'][number];

function share(block: CheckedBlock, test: (trial: Trial) => boolean): number {
	return block.trials.length === 0 ? 1 : block.trials.filter(test).length / block.trials.length;
}

function isOutside(
	value: number | null,
	variable: Roster['variables'][number] | undefined
): boolean {
	return value !== null && variable !== undefined && (value < variable.min || value > variable.max);
}

function isConstant(block: CheckedBlock, index: number): boolean {
	const first = block.trials[0]?.execution[index];
	return block.trials.every((trial) => trial.execution[index] === first);
}
