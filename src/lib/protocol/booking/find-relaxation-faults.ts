import { checkNumber, faultAt, type Fault } from '../fault';
import type { ProtocolDraft } from '../protocol-draft';
import { relaxableRules } from './relaxable-words';

/** What is wrong with the missed-day rule and with what may give way. */
export function findRelaxationFaults(draft: ProtocolDraft): Fault[] {
	return [...findMissedDayFaults(draft), ...draft.relaxation.flatMap(checkStep)];
}

function findMissedDayFaults({ missedDay }: ProtocolDraft): Fault[] {
	if (!missedDay) return [];
	const place = 'Missed practice day';
	return [
		...checkNumber({
			...{ value: missedDay.withinHours, place, field: 'missedDay.withinHours', name: 'Within' },
			...{ unit: 'h', min: 0, max: 8760 }
		}),
		...checkNumber({
			...{ value: missedDay.mostMissed, place, field: 'missedDay.mostMissed' },
			...{ name: 'Missed days', min: 0, max: 20, isWhole: true }
		})
	];
}

type Step = ProtocolDraft['relaxation'][number];

function checkStep({ rule, by, price }: Step, index: number, steps: readonly Step[]): Fault[] {
	const place = `Gives way, ${index + 1}`;
	const { name, unit } = relaxableRules[rule];
	const faults = [
		...checkNumber({
			...{ value: by, place, field: `relaxation.${index}.by`, name: `By how much ${name}` },
			...{ unit, min: 0.01, max: 10_000 }
		}),
		...checkNumber({
			...{ value: price, place, field: `relaxation.${index}.price`, name: 'Price' },
			...{ min: 0, max: 1000 }
		})
	];
	const before = steps.slice(0, index).findLast((step) => step.rule === rule);
	if (!before || before.by === null || by === null || by > before.by) return faults;
	const where = { place, field: `relaxation.${index}.by` };
	const text = `${name} gave way by ${before.by} ${unit} already.`;
	return [...faults, faultAt('step-no-further', where, text, 'Go further, or take the step out.')];
}
