import { faultAt, type Fault } from './fault';
import type { BlockDraft, VisitDraft } from './draft-parts';
import type { ProtocolDraft } from './protocol-draft';
import { visitName } from './visit-name';

/**
 * Operators see how many blocks a visit has and how many trials each: where they are blinded, these are
 * the same in every arm.
 */
export function findBlindingFaults({ arms, visits, variants }: ProtocolDraft): Fault[] {
	if (variants.includes('open-operator') || arms.length < 2) return [];
	return visits.flatMap((visit, index): Fault[] => {
		const [first, ...others] = arms.map(({ key, name }) => ({
			name: name.trim() || key,
			shape: shapeOf(visit.armBlocks[key] ?? visit.blocks)
		}));
		const other = others.find(({ shape }) => shape !== first?.shape);
		if (!first || !other || hasGap(visit)) return [];
		const text = `${first.name} has ${first.shape}, ${other.name} ${other.shape}: the operator, who is blinded, would see the arm.`;
		const where = { place: visitName(visit, index), field: `visits.${index}.blocks` };
		const remedy =
			'Give every arm as many blocks with the same trials, or declare that operators are not blinded.';
		return [faultAt('blocks-tell-arm', where, text, remedy)];
	});
}

/** '4 blocks of 40, 60, 60, 60 trials', as an operator would count them. */
function shapeOf(blocks: readonly BlockDraft[]): string {
	const lengths = blocks.map(({ purpose, trials, restMinutes }) =>
		purpose === 'rest' ? `rest ${restMinutes ?? 0} min` : String(trials ?? 0)
	);
	const run = lengths.filter((length, index) => index > 0 && length !== lengths[index - 1]);
	const said = run.length === 0 ? (lengths[0] ?? '0') : lengths.join(', ');
	return `${blocks.length} ${blocks.length === 1 ? 'block' : 'blocks'} of ${said} trials`;
}

/** A number that is not typed yet is asked for at its own field. */
function hasGap({ blocks, armBlocks }: VisitDraft): boolean {
	const lists = [blocks, ...Object.values(armBlocks)];
	return lists.some((list) =>
		list.some(({ purpose, trials }) => purpose !== 'rest' && trials === null)
	);
}
