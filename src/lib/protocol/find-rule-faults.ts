import { checkNumber, checkText, faultAt, type Fault } from './fault';
import { hasAdaptiveTime } from './has-adaptive-time';
import type { ProtocolDraft } from './protocol-draft';

/** What is wrong with aims, guard rails and the hours at which things happen. */
export function findRuleFaults(draft: ProtocolDraft): Fault[] {
	return [
		...(hasAdaptiveTime(draft) ? [...findAimFaults(draft), ...findGuardFaults(draft)] : []),
		...findArmFaults(draft),
		...findHourFaults(draft),
		...findTimelineFaults(draft),
		...checkText({
			value: draft.consentTextVersion,
			place: 'Consent',
			field: 'consentTextVersion',
			name: 'The version of the consent text',
			remedy: 'Write the version that people will sign.'
		})
	];
}

function findAimFaults({ aims, arms }: ProtocolDraft): Fault[] {
	if (!arms.some(({ rule }) => rule === 'adaptive')) return [];
	const { region, shift } = aims;
	if (!region.isOn && !shift.isOn) {
		const where = { place: 'Aims', field: 'aims.region.isOn' };
		const text = 'No aim is chosen: the scheduler would never challenge anybody.';
		return [faultAt('no-aim', where, text, 'Choose penalized regions, a target shift, or both.')];
	}
	const share = (value: number | null, field: string, place: string) =>
		checkNumber({ value, place, field, name: 'Share', min: 0.01, max: 1 });
	return [
		...(region.isOn
			? [
					...share(region.share, 'aims.region.share', 'Aims, penalized regions'),
					...checkNumber({
						value: region.escapes,
						place: 'Aims, penalized regions',
						field: 'aims.region.escapes',
						name: 'Escapes to reach',
						min: 1,
						max: 50,
						isWhole: true
					})
				]
			: []),
		...(shift.isOn
			? [
					...share(shift.share, 'aims.shift.share', 'Aims, target shift'),
					...checkNumber({
						value: shift.goal,
						place: 'Aims, target shift',
						field: 'aims.shift.goal',
						name: 'Distance to reach',
						unit: 'SD',
						min: 0.5,
						max: 20
					})
				]
			: [])
	];
}

function findGuardFaults({ guardRails, settle }: ProtocolDraft): Fault[] {
	const place = 'Guard rails';
	const blocks = (value: number | null, field: string, name: string) =>
		checkNumber({ value, place: 'Aims', field, name, min: 1, max: 20, isWhole: true });
	const { minBlocks, maxBlocks } = settle;
	const faults = [
		...checkNumber({
			value: guardRails.automaticCoverMax,
			place,
			field: 'guardRails.automaticCoverMax',
			name: 'Largest cover without asking',
			min: 0,
			max: 1
		}),
		...checkNumber({
			value: guardRails.automaticReachSdMax,
			place,
			field: 'guardRails.automaticReachSdMax',
			name: 'Longest reach without asking',
			unit: 'SD',
			min: 0,
			max: 20
		}),
		...blocks(minBlocks, 'settle.minBlocks', 'Plain blocks at least'),
		...blocks(maxBlocks, 'settle.maxBlocks', 'Plain blocks at most')
	];
	if (minBlocks !== null && maxBlocks !== null && minBlocks > maxBlocks) {
		const where = { place: 'Aims', field: 'settle.minBlocks' };
		const text = `At least ${minBlocks} plain blocks, at most ${maxBlocks}.`;
		faults.push(faultAt('settle-order', where, text, 'Let the least not exceed the most.'));
	}
	return faults;
}

function findArmFaults({ arms }: ProtocolDraft): Fault[] {
	return arms.flatMap(({ name }, index) => {
		const where = { place: `Arm ${index + 1}`, field: `arms.${index}.name` };
		if (name.trim() === '') {
			return [faultAt('arm-nameless', where, 'The arm has no name.', 'Name it.')];
		}
		const isTaken = arms.findIndex((other) => other.name.trim() === name.trim()) < index;
		const text = `Two arms are called ${name}.`;
		return isTaken ? [faultAt('arm-twice', where, text, 'Give each a name of its own.')] : [];
	});
}

function findHourFaults(draft: ProtocolDraft): Fault[] {
	const place = 'Hours';
	const hours = (value: number | null, field: string, name: string, max: number) =>
		checkNumber({ value, place, field, name, unit: 'h', min: 0, max });
	const { min, max } = draft.earliestStartHours;
	const faults = [
		...hours(draft.readyLeadHours, 'readyLeadHours', 'Lead of decisions', 72),
		...hours(draft.invitationDelayHours, 'invitationDelayHours', 'Delay of invitations', 336),
		...hours(min, 'earliestStartHours.min', 'Earliest start, from', 8760),
		...hours(max, 'earliestStartHours.max', 'Earliest start, to', 8760)
	];
	if (min !== null && max !== null && min > max) {
		const where = { place, field: 'earliestStartHours.min' };
		const text = `The earliest start is drawn from ${min} to ${max} h.`;
		faults.push(faultAt('start-order', where, text, 'Let the first not exceed the second.'));
	}
	return faults;
}

/** Decisions, invitations and earliest starts must fit between the visits they belong to. */
function findTimelineFaults(draft: ProtocolDraft): Fault[] {
	const place = 'Hours';
	const faults: Fault[] = [];
	const [, second, ...later] = draft.visits;
	if (!second) return faults;
	const { minHours, maxHours } = second.gapBefore;
	const lead = draft.readyLeadHours;
	const shortest = Math.min(...[second, ...later].map((visit) => visit.gapBefore.minHours ?? 0));
	if (lead !== null && lead > shortest) {
		const text = `Decisions are due ${lead} h before a visit, but a visit may follow after ${shortest} h.`;
		const where = { place, field: 'readyLeadHours' };
		faults.push(faultAt('lead-too-long', where, text, 'Shorten the lead or lengthen the gap.'));
	}
	const delay = draft.invitationDelayHours;
	if (delay !== null && minHours !== null && delay >= minHours) {
		const text = `Invitations leave ${delay} h after the baseline visit, but the next may come after ${minHours} h.`;
		const where = { place, field: 'invitationDelayHours' };
		faults.push(faultAt('delay-too-long', where, text, 'Shorten the delay or lengthen the gap.'));
	}
	const latest = draft.earliestStartHours.max;
	if (latest !== null && maxHours !== null && latest >= maxHours) {
		const text = `The earliest start may lie ${latest} h after allocation, past the longest gap of ${maxHours} h.`;
		const where = { place, field: 'earliestStartHours.max' };
		faults.push(faultAt('start-too-late', where, text, 'Lower it, or lengthen the gap.'));
	}
	return faults;
}
