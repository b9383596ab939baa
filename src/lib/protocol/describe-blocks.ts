import type { BlockPlan } from '$scheduler/protocol/block-plan';
import { pathsIn, type Reader } from './protocol-line';

/** '4 adaptive blocks of 60', runs of equal blocks told together. */
export function describeBlocks(
	blocks: readonly BlockPlan[],
	reader: Reader = { withRule: true }
): string {
	const runs: { words: BlockWords; count: number }[] = [];
	for (const block of blocks) {
		const words = wordBlock(block, reader);
		const last = runs.at(-1);
		if (last && sameWords(last.words, words)) last.count += 1;
		else runs.push({ words, count: 1 });
	}
	return runs.map(({ words, count }) => writeRun(words, count)).join(', ');
}

type BlockWords = { name: string; size: string; details: string[] };

function sameWords(one: BlockWords, other: BlockWords): boolean {
	return JSON.stringify(one) === JSON.stringify(other);
}

function writeRun({ name, size, details }: BlockWords, count: number): string {
	const noun = count === 1 ? `1 ${name}` : `${count} ${name}s`;
	const detail = details.length === 0 ? '' : ` (${details.join('; ')})`;
	return `${noun} of ${size}${detail}`;
}

function wordBlock(block: BlockPlan, reader: Reader): BlockWords {
	const { purpose, trials, restMinutes } = block;
	const details = [...listPace(block), ...(reader.withRule ? listManipulation(block) : [])];
	if (purpose === 'rest' && restMinutes !== undefined) {
		const size = trials === 0 ? `${restMinutes} min` : `${restMinutes} min with ${trials} trials`;
		return { name: 'rest', size, details };
	}
	const rest = restMinutes === undefined ? [] : [`${restMinutes} min of rest`];
	return { name: `${purpose} block`, size: String(trials), details: [...rest, ...details] };
}

function listPace(block: BlockPlan): string[] {
	const { warmUpTrials, restBetweenTrialsSeconds, restAfterMinutes } = block;
	return [
		...(warmUpTrials === undefined ? [] : [`${warmUpTrials} of them warm-up`]),
		...(restBetweenTrialsSeconds === undefined
			? []
			: [`${restBetweenTrialsSeconds} s between trials`]),
		...(restAfterMinutes === undefined ? [] : [`${restAfterMinutes} min of rest after it`])
	];
}

function listManipulation(block: BlockPlan): string[] {
	const { instruction, feedback, targetOffset, region, shift } = block;
	return [
		...(instruction === undefined ? [] : [`instruction ${instruction}`]),
		...(feedback === undefined ? [] : [`feedback ${feedback.replaceAll('-', ' ')}`]),
		...(targetOffset === undefined ? [] : [`target ${targetOffset} beside the usual one`]),
		...(region ? [`region at ${region.center.join(', ')} ± ${region.halfWidth.join(', ')}`] : []),
		...(shift ? [`target moved from ${shift.from} to ${shift.to}`] : [])
	];
}

/** Paths of what the words of blocks tell; numbers of blocks only where they count from 1. */
export function listBlockPaths(place: string, blocks: readonly BlockPlan[], reader: Reader) {
	return blocks.flatMap((block, index) => {
		const { region, shift } = block;
		const own = ['purpose', 'trials', 'restMinutes', 'warmUpTrials'];
		const pace = ['restBetweenTrialsSeconds', 'restAfterMinutes'];
		const hidden = ['instruction', 'feedback', 'targetOffset'];
		const axes = (name: 'center' | 'halfWidth') =>
			(region?.[name] ?? []).map((_, at) => `region.${name}.${at + 1}`);
		return pathsIn(`${place}.${index + 1}`, [
			...(block.number === index + 1 ? ['number'] : []),
			...own,
			...pace,
			...(reader.withRule ? hidden : []),
			...(reader.withRule ? [...axes('center'), ...axes('halfWidth')] : []),
			...(reader.withRule && shift ? ['shift.from', 'shift.to'] : [])
		]);
	});
}
