import { faultAt, type Fault, type RigLimit } from './fault';
import type { VisitDraft } from './draft-parts';
import type { ProtocolDraft } from './protocol-draft';
import { countTrials, visitName } from './visit-name';

/** A visit against the limits of the protocol itself. */
export function findLimitFaults(
	visit: VisitDraft,
	index: number,
	limits: ProtocolDraft['limits']
): Fault[] {
	const place = visitName(visit, index);
	const trials = countTrials(visit);
	const faults: Fault[] = [];
	if (
		visit.minutes !== null &&
		limits.minutesPerVisit !== null &&
		visit.minutes > limits.minutesPerVisit
	) {
		faults.push(
			faultAt(
				'over-minutes',
				{ place, field: `visits.${index}.minutes` },
				`${visit.minutes} min, the protocol's limit is ${limits.minutesPerVisit} min.`,
				'Shorten the visit or raise the limit.'
			)
		);
	}
	if (limits.trialsPerVisit !== null && trials > limits.trialsPerVisit) {
		faults.push(
			faultAt(
				'over-trials',
				{ place, field: `visits.${index}.blocks` },
				`${trials} trials, the protocol's limit is ${limits.trialsPerVisit}.`,
				'Take trials out or raise the limit.'
			)
		);
	}
	return faults;
}

/**
 * A visit against the limits of the lab's rigs. Too much for every rig is a fault where blocks are
 * issued to them, and a caution where data are only recorded.
 */
export function findRigFaults(
	visit: VisitDraft,
	index: number,
	{ rigs, isIssued }: { rigs: readonly RigLimit[]; isIssued: boolean }
): Fault[] {
	const trials = countTrials(visit);
	const isOver = (rig: RigLimit) =>
		(visit.minutes ?? 0) > rig.minutesPerVisit || trials > rig.trialsPerVisit;
	const unfit = rigs.filter(isOver);
	if (unfit.length === 0) return [];
	const limits = unfit.map(
		(rig) => `${rig.name} ${rig.minutesPerVisit} min and ${rig.trialsPerVisit} trials`
	);
	const isNowhere = unfit.length === rigs.length;
	const remedies = {
		some: 'Shorten the visit, or know that only the other rigs can run it.',
		issued: 'Shorten the visit: no rig may run it.',
		recorded: 'Shorten the visit, unless its data were recorded elsewhere.'
	};
	return [
		{
			code: isNowhere ? 'over-every-rig' : 'over-one-rig',
			level: isNowhere && isIssued ? 'fault' : 'caution',
			place: visitName(visit, index),
			field: `visits.${index}.minutes`,
			text: `${visit.minutes ?? 0} min and ${trials} trials; allowed a visit: ${limits.join(', ')}.`,
			remedy: remedies[isNowhere ? (isIssued ? 'issued' : 'recorded') : 'some']
		}
	];
}
