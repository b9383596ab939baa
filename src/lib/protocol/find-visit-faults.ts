import { checkNumber, checkText, faultAt, type Fault, type RigLimit } from './fault';
import { findBlockFaults } from './find-block-faults';
import { findLimitFaults, findRigFaults } from './find-limit-faults';
import { visitName } from './visit-name';
import { hasAdaptiveTime } from './has-adaptive-time';
import type { VisitDraft } from './draft-parts';
import type { ProtocolDraft } from './protocol-draft';

/** What is wrong with visits and their blocks: lengths, limits, order of kinds. */
export function findVisitFaults(draft: ProtocolDraft, rigs: readonly RigLimit[]): Fault[] {
	return [
		...findOrderFaults(draft.visits),
		...draft.visits.flatMap((visit, index) => [
			...findFieldFaults(visit, index),
			...findBlockFaults(visit, index),
			...findLimitFaults(visit, index, draft.limits),
			...findRigFaults(visit, index, { rigs, isIssued: hasAdaptiveTime(draft) })
		]),
		...findLengthFaults(draft.visits)
	];
}

function findOrderFaults(visits: readonly VisitDraft[]): Fault[] {
	const where = { place: 'Visits', field: 'visits' };
	if (visits.length === 0)
		return [faultAt('no-visit', where, 'There is no visit.', 'Add a visit.')];
	const faults: Fault[] = [];
	if (visits[0]?.kind !== 'baseline') {
		faults.push(
			faultAt(
				'no-baseline',
				where,
				'The first visit is no baseline visit.',
				'Start with a baseline visit: without its data nobody can be allocated.'
			)
		);
	}
	visits.forEach(({ kind }, index) => {
		const at = { place: 'Visits', field: `visits.${index}.kind` };
		if (index > 0 && kind === 'baseline') {
			faults.push(
				faultAt(
					'second-baseline',
					at,
					'There is a second baseline visit.',
					'Make it a practice visit, or take it out.'
				)
			);
		}
		if (kind === 'retention' && visits.slice(index).some((later) => later.kind === 'practice')) {
			faults.push(
				faultAt(
					'retention-early',
					at,
					'Practice follows a retention visit.',
					'Move the retention visit behind the last practice.'
				)
			);
		}
	});
	return faults;
}

function findFieldFaults(visit: VisitDraft, index: number): Fault[] {
	const place = visitName(visit, index);
	const minutes = (
		name: 'minutes' | 'setupMinutes' | 'cleanupMinutes',
		label: string,
		min: number,
		max: number
	) =>
		checkNumber({
			value: visit[name],
			place,
			field: `visits.${index}.${name}`,
			name: label,
			unit: 'min',
			min,
			max,
			isWhole: true
		});
	return [
		...checkText({
			value: visit.label,
			place,
			field: `visits.${index}.label`,
			name: 'The name',
			remedy: 'Name the visit, such as “Day 1”.'
		}),
		...minutes('minutes', 'Length', 5, 600),
		...minutes('setupMinutes', 'Set-up', 0, 240),
		...minutes('cleanupMinutes', 'Clean-up', 0, 240)
	];
}

/** Blinding needs one length: a block's length must not tell of which kind it is. */
function findLengthFaults(visits: readonly VisitDraft[]): Fault[] {
	const lengths = visits.flatMap((visit, index) =>
		visit.blocks.flatMap(({ purpose, trials }, at) =>
			purpose === 'adaptive' && trials !== null
				? [{ trials, index, at, name: visitName(visit, index) }]
				: []
		)
	);
	const first = lengths[0];
	const other = lengths.find(({ trials }) => trials !== first?.trials);
	if (!first || !other) return [];
	const where = {
		place: `${other.name}, block ${other.at + 1}`,
		field: `visits.${other.index}.blocks.${other.at}.trials`
	};
	return [
		faultAt(
			'adaptive-lengths',
			where,
			`${other.trials} trials, but ${first.trials} in ${first.name}: the length would tell blocks apart.`,
			`Give every adaptive block ${first.trials} trials.`
		)
	];
}
