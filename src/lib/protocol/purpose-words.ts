import { BLOCK_PURPOSES, type BlockPurpose } from '$scheduler/protocol/block-plan';

/** What a block is for: in a list of choices, and on a piece of the ladder. */
export const purposeWords: Record<BlockPurpose, { label: string; short: string }> = {
	baseline: { label: 'baseline', short: 'baseline' },
	practice: { label: 'practice', short: 'practice' },
	region: { label: 'penalized region', short: 'region' },
	shift: { label: 'target shift', short: 'shift' },
	probe: { label: 'probe', short: 'probe' },
	clamp: { label: 'error clamp', short: 'clamp' },
	washout: { label: 'washout', short: 'washout' },
	rest: { label: 'rest', short: 'rest' },
	retention: { label: 'retention', short: 'retention' },
	transfer: { label: 'transfer', short: 'transfer' },
	adaptive: { label: 'adaptive time', short: 'adaptive' }
};

export const purposeOptions = BLOCK_PURPOSES.map((value) => ({
	value,
	label: purposeWords[value].label
}));
