import { checkNumber, faultAt, type Fault } from './fault';
import type { ProtocolDraft } from './protocol-draft';
import { visitName } from './visit-name';

/** What is wrong with arms that follow another, and with when they do. */
export function findYokingFaults(draft: ProtocolDraft): Fault[] {
	const { arms, yoking } = draft;
	if (!arms.some(({ rule }) => rule === 'yoked')) return [];
	const place = 'Yoking';
	return [
		...arms.flatMap((_, index) => findMasterFaults(arms, index)),
		...checkNumber({
			...{ value: yoking.leadHours, place, field: 'yoking.leadHours', name: 'Lead' },
			...{ unit: 'h', min: 0, max: 8760 }
		}),
		...findBaselineFaults(draft)
	];
}

function findMasterFaults(arms: ProtocolDraft['arms'], index: number): Fault[] {
	const arm = arms[index];
	if (arm?.rule !== 'yoked') return [];
	const where = { place: `Arm ${index + 1}`, field: `arms.${index}.master` };
	const master = arms.find(({ key }) => key === arm.master);
	const remedy = 'Choose an adaptive arm for it to follow.';
	if (!master) {
		return [faultAt('no-master', where, `${arm.name || 'The arm'} follows no arm.`, remedy)];
	}
	if (master.key === arm.key) {
		return [faultAt('master-itself', where, `${arm.name} follows itself.`, remedy)];
	}
	if (master.rule === 'adaptive') return [];
	const text = `${arm.name} follows ${master.name || master.key}, which is ${master.rule}: there is nothing of a person's own to repeat.`;
	return [faultAt('master-not-adaptive', where, text, remedy)];
}

/** Pairs are made from the baselines of both, so a baseline is over before anybody is allocated. */
function findBaselineFaults({ visits }: ProtocolDraft): Fault[] {
	const [first] = visits;
	const all = first ? [first.blocks, ...Object.values(first.armBlocks)].flat() : [];
	const practised = all.some(({ purpose }) => !['baseline', 'rest', 'probe'].includes(purpose));
	if (!first || !practised) return [];
	const where = { place: visitName(first, 0), field: 'visits.0.blocks' };
	const text = 'Practice begins in the visit of the baseline, but a yoked arm is paired by it.';
	return [faultAt('yoked-baseline-inside', where, text, 'Give the baseline a visit of its own.')];
}
