import type { BlockDraft, VisitDraft } from './draft-parts';
import { checkNumber, faultAt, type Fault } from './fault';
import { visitName } from './visit-name';

/** What each kind of visit is for: one of its blocks must be that. */
const wanted = {
	baseline: ['baseline'],
	practice: ['adaptive', 'practice', 'region', 'shift', 'clamp', 'washout'],
	retention: ['retention', 'transfer']
} as const satisfies Record<VisitDraft['kind'], readonly BlockDraft['purpose'][]>;

type BlockList = { blocks: readonly BlockDraft[]; field: string; place: string };

/** What is wrong with the blocks of a visit, in the list of every arm and in those of single arms. */
export function findBlockFaults(visit: VisitDraft, index: number): Fault[] {
	const name = visitName(visit, index);
	const lists: BlockList[] = [
		{ blocks: visit.blocks, field: `visits.${index}.blocks`, place: name },
		...Object.entries(visit.armBlocks).map(([arm, blocks]) => ({
			blocks,
			field: `visits.${index}.armBlocks.${arm}`,
			place: `${name}, blocks of ${arm}`
		}))
	];
	return lists.flatMap((list) => findListFaults(visit, list));
}

function findListFaults({ kind }: VisitDraft, { blocks, field, place }: BlockList): Fault[] {
	if (blocks.length === 0) {
		return [faultAt('no-block', { place, field }, 'The visit has no block.', 'Add a block.')];
	}
	const faults = blocks.flatMap((block, at) =>
		findNumberFaults(block, { place: `${place}, block ${at + 1}`, field: `${field}.${at}` })
	);
	const purposes: readonly string[] = wanted[kind];
	if (!blocks.some(({ purpose }) => purposes.includes(purpose))) {
		const [usual] = wanted[kind];
		const word = usual === 'adaptive' ? 'adaptive time or practice' : `a ${usual} block`;
		const text = `A ${kind} visit without ${word}.`;
		const remedy = `Make one of its blocks ${usual}, or change the kind of visit.`;
		faults.push(faultAt(`no-${usual}-block`, { place, field }, text, remedy));
	}
	if (kind !== 'practice' && blocks.some(({ purpose }) => purpose === 'adaptive')) {
		const text = `Adaptive time in a ${kind} visit.`;
		const remedy = 'Adaptive time belongs to practice visits, after allocation.';
		faults.push(faultAt('adaptive-misplaced', { place, field }, text, remedy));
	}
	return faults;
}

function findNumberFaults(
	block: BlockDraft,
	{ place, field }: { place: string; field: string }
): Fault[] {
	const { purpose } = block;
	const check = (name: keyof BlockDraft & string, rule: Omit<Range, 'value'>) =>
		checkNumber({ ...rule, value: asNumber(block[name]), place, field: `${field}.${name}` });
	if (purpose === 'rest') {
		return check('restMinutes', { name: 'Length of the rest', unit: 'min', min: 0.5, max: 240 });
	}
	return [
		...check('trials', { name: 'Trials', min: 1, max: 2000, isWhole: true }),
		...(purpose === 'transfer' ? findTransferFaults(block, { place, field }) : []),
		...(purpose === 'shift' ? findShiftFaults(block, { place, field }) : []),
		...(purpose === 'region' && !block.region
			? [
					faultAt(
						'region-missing',
						{ place, field: `${field}.region` },
						'The penalized region has no place.',
						'Say where it lies and how wide it is.'
					)
				]
			: [])
	];
}

type Range = Omit<Parameters<typeof checkNumber>[0], 'place' | 'field'>;

function asNumber(value: unknown): number | null {
	return typeof value === 'number' ? value : null;
}

function findTransferFaults(
	{ targetOffset }: BlockDraft,
	{ place, field }: { place: string; field: string }
): Fault[] {
	if (targetOffset) return [];
	const where = { place, field: `${field}.targetOffset` };
	const text = 'Transfer has no other target.';
	return [faultAt('transfer-target', where, text, 'Say how far the other target lies away.')];
}

function findShiftFaults(
	{ shift }: BlockDraft,
	{ place, field }: { place: string; field: string }
): Fault[] {
	if (shift && shift.from !== null && shift.to !== null) return [];
	const where = { place, field: `${field}.shift` };
	const text = 'The target shift has no distance.';
	return [faultAt('shift-missing', where, text, 'Say from where to where the target moves.')];
}
