import { placedRegionSchema } from '$scheduler/perturbations/region-settings';
import type { SettleInput } from '$lib/decisions/settle-input';
import type { BlockPlanned } from './effective-block';

export type Changed = { ok: true; block: BlockPlanned } | { ok: false; detail: string };

/**
 * The block with a smaller region: an approver may make a region milder, never harder, so that the
 * way out that was found stays open. Axes shrink about the same centre.
 */
export function changeBlock(block: BlockPlanned, input: SettleInput): Changed {
	const region = placedRegionSchema.safeParse(block.parameters.region);
	if (block.kind !== 'region' || !region.success) {
		return {
			ok: false,
			detail: 'Only a region can be changed here. Use the block, or run plain practice.'
		};
	}
	if (input.sizePercent === 100) {
		return {
			ok: false,
			detail: 'The size is the proposed one. Choose a smaller one, or use the block as it is.'
		};
	}
	const ratio = input.sizePercent / 100;
	const shape = region.data.shape.map((row) => row.map((value) => value * ratio * ratio));
	const smaller = { ...region.data, shape, k: region.data.k * ratio };
	return {
		ok: true,
		block: { kind: 'region', parameters: { ...block.parameters, region: smaller } }
	};
}
