import { betraysArm, type ColumnUse, type Mapping } from '$lib/intake/column-use';
import type { ProblemList } from './problem-list';
import { findUnitFactor } from './read-number';
import { findOnlyVisit, type Roster } from './roster';

export type KeyUse = 'participant' | 'visit' | 'block' | 'trial' | 'date';

/** Where in a row everything stands. */
export type Columns = {
	header: readonly string[];
	keys: Partial<Record<KeyUse, number>>;
	/** One for each variable of the task, in its order; undefined where no column is read as it. */
	values: ({ index: number; factor: number; column: string } | undefined)[];
};

const required: KeyUse[] = ['participant', 'visit', 'block', 'trial'];

/** Turns the mapping into places in a row; what is missing, doubled or in another unit is a problem. */
export function readColumns(
	header: readonly string[],
	{ mapping, roster, problems }: { mapping: Mapping; roster: Roster; problems: ProblemList }
): Columns {
	const columns: Columns = { header, keys: {}, values: [] };
	const place = { columns, roster, problems };
	for (const [index, name] of header.entries()) {
		placeColumn(place, index, mapping.columns[name] ?? { use: 'ignore' });
	}
	for (const key of required) {
		if (key === 'visit' && findOnlyVisit(roster) !== null) continue;
		if (columns.keys[key] !== undefined) continue;
		const message = `No column is read as the ${key} number or code. Choose one.`;
		problems.fault('column-missing', message);
	}
	for (const [position, { name, unit }] of roster.variables.entries()) {
		if (columns.values[position]) continue;
		problems.fault('column-missing', `No column is read as ${name} (${unit}). Choose one.`);
	}
	return columns;
}

type Place = { columns: Columns; roster: Roster; problems: ProblemList };

function placeColumn({ columns, roster, problems }: Place, index: number, use: ColumnUse): void {
	const column = columns.header[index] ?? '';
	if (betraysArm(column)) {
		const message = `Column ${column} may name the arm: it is ignored and never stored.`;
		problems.warn('arm-column-ignored', message, { column });
		return;
	}
	if (use.use === 'ignore') return;
	if (use.use === 'variable') {
		placeVariable({ columns, roster, problems }, index, use);
		return;
	}
	if (columns.keys[use.use] !== undefined) {
		problems.fault('column-twice', `Two columns are read as ${use.use}. Keep one.`, { column });
	}
	columns.keys[use.use] = index;
}

type VariableUse = Extract<ColumnUse, { use: 'variable' }>;

function placeVariable(
	{ columns, roster, problems }: Place,
	index: number,
	use: VariableUse
): void {
	const column = columns.header[index] ?? '';
	const position = roster.variables.findIndex(({ name }) => name === use.variable);
	const variable = roster.variables[position];
	if (!variable) {
		const message = `The task has no variable ${use.variable}.`;
		return problems.fault('unknown-variable', message, { column });
	}
	const { name, unit } = variable;
	if (columns.values[position]) {
		const message = `Two columns are read as ${name}. Keep one.`;
		return problems.fault('column-twice', message, { column });
	}
	const factor = findUnitFactor(use.unit, unit);
	if (factor === null) {
		const message = `${use.unit} cannot be turned into ${unit}, the unit of ${name}.`;
		return problems.fault('unit-clash', message, { column });
	}
	if (factor !== 1) {
		const message = `${column} is turned from ${use.unit} into ${unit}.`;
		problems.warn('unit-converted', message, { column });
	}
	columns.values[position] = { index, factor, column };
}
