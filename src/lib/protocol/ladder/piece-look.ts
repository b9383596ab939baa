import type { ArmDraft } from '../draft-parts';
import { purposeWords } from '../purpose-words';
import type { BlockPurpose } from '$scheduler/protocol/block-plan';
import { blockMinutes, type TimedBlock } from './block-minutes';

/** How a block looks and reads on its piece: kind by word, mark and tone together. */
export type PieceLook = {
	word: string;
	/** In full, for readers and tips. */
	name: string;
	mark: 'none' | 'slot' | 'ring' | 'bar' | 'pause';
	tone: string;
	isMono: boolean;
};

type Place = { arm: Pick<ArmDraft, 'rule'>; visitIndex: number; index: number };

const tones: Record<BlockPurpose, string> = {
	baseline: 'border-edge bg-sheet text-ink',
	practice: 'border-spruce bg-sheet text-spruce',
	region: 'border-persimmon piece-hatched text-ink',
	shift: 'border-amber bg-amber-wash text-amber',
	probe: 'border-spruce bg-spruce-wash text-spruce',
	clamp: 'border-ink bg-sheet text-ink',
	washout: 'border-edge border-dotted bg-sheet text-ink',
	rest: 'border-transparent bg-paper text-muted',
	retention: 'border-spruce bg-sheet text-spruce',
	transfer: 'border-spruce bg-sheet text-spruce',
	adaptive: 'border-dashed border-iris bg-sheet text-iris'
};

const marks: Record<BlockPurpose, PieceLook['mark']> = {
	baseline: 'none',
	practice: 'none',
	region: 'none',
	shift: 'ring',
	probe: 'none',
	clamp: 'bar',
	washout: 'none',
	rest: 'pause',
	retention: 'none',
	transfer: 'none',
	adaptive: 'slot'
};

export function pieceLook({ purpose }: { purpose: string }, place: Place): PieceLook {
	const known = purpose as BlockPurpose;
	const slot = `${place.visitIndex}.${place.index + 1}`;
	if (known !== 'adaptive' || place.arm.rule === 'fixed') {
		const shown = known === 'adaptive' ? 'practice' : known;
		const { short, label } = purposeWords[shown];
		return { word: short, name: label, mark: marks[shown], tone: tones[shown], isMono: false };
	}
	if (place.arm.rule === 'adaptive') {
		const name = `adaptive time, slot ${slot}`;
		return { word: slot, name, mark: 'slot', tone: tones.adaptive, isMono: true };
	}
	const tone = 'border-dotted border-edge bg-sheet text-muted';
	return {
		word: `as ${slot}`,
		name: `as the partner’s slot ${slot}`,
		mark: 'none',
		tone,
		isMono: true
	};
}

/** Heights follow minutes between a line of text and three of them. */
const pxPerMinute = 2.8;
const lowestPx = 23;
const highestPx = 92;

export function pieceHeightPx(block: TimedBlock, trialSeconds: number | null): number {
	const minutes = blockMinutes(block, trialSeconds) ?? 0;
	return Math.round(Math.min(highestPx, Math.max(lowestPx, minutes * pxPerMinute)));
}

/** '60' trials, or '5 min' of rest. */
export function pieceFigure({ purpose, trials, restMinutes }: TimedBlock): string {
	if (purpose === 'rest') return `${restMinutes ?? '?'} min`;
	return String(trials ?? '?');
}

/** What a reader hears of a piece, what stands on it first: 'probe 40 trials, 2 of 4, 5.3 min'. */
export function pieceText(
	block: TimedBlock & { warmUpTrials?: number | null | undefined },
	look: PieceLook,
	{ index, count, trialSeconds }: { index: number; count: number; trialSeconds: number | null }
): string {
	const minutes = blockMinutes(block, trialSeconds);
	const isRest = block.purpose === 'rest';
	return [
		`${look.word} ${pieceFigure(block)}${isRest ? '' : ' trials'}`,
		...(look.name === look.word ? [] : [look.name]),
		`${index + 1} of ${count}`,
		...(block.warmUpTrials ? [`${block.warmUpTrials} of them warm-up`] : []),
		...(minutes === null || isRest ? [] : [`${Math.round(minutes * 10) / 10} min`]),
		...(block.restAfterMinutes ? [`then ${block.restAfterMinutes} min rest`] : [])
	].join(', ');
}
