import type { UnitNote } from '$scheduler/tasks/formula/check-units';

/** What is odd about the units of a formula, in a sentence that says how to mend it. */
export function tellUnitNote({ code, left, right }: UnitNote): string {
	switch (code) {
		case 'mixed-sum':
			return `${left} and ${right} are added or compared, but do not measure the same kind of thing.`;
		case 'sum-needs-number-unit':
			return `${left} and ${right} fit only if the plain numbers among them carry a unit, as 9.81 for gravity does.`;
		case 'different-size':
			return `${left} and ${right} are of one kind but written in units of different size: convert one.`;
		case 'unit-in-function':
			return `${right} takes a plain number, not ${left}.`;
		case 'degrees-as-radians':
			return `${right} takes radians, but ${left} is in degrees: write ${left} * pi / 180.`;
		case 'variable-power':
			return `${left} is raised to a power that varies (${right}): the unit would vary with it.`;
		case 'result-unit':
			return `The formula gives ${left}, but ${right} is said.`;
		case 'unreadable-unit':
			return `“${left}” cannot be read as a unit.`;
	}
}
