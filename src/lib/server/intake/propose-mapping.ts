import { betraysArm, type ColumnUse, type Mapping } from '$lib/intake/column-use';
import { knownUnits } from './read-number';
import type { Table } from './read-table';

export type VariableName = { name: string; unit: string };

const keyNames: Record<'participant' | 'visit' | 'block' | 'trial' | 'date', RegExp> = {
	participant:
		/^(participant|participant[_ ]?(id|code|no)|subject|subject[_ ]?(id|no)|code|person|id)$/i,
	visit: /^(visit|visit[_ ]?(no|number)?|day|day[_ ]?no|session|session[_ ]?(no|number))$/i,
	block: /^(block|block[_ ]?(no|number|id)?|run)$/i,
	trial: /^(trial|trial[_ ]?(no|number|id)?|trialno)$/i,
	date: /^(date|visit[_ ]?date|session[_ ]?date|day[_ ]?date|recorded[_ ]?on)$/i
};

/** Offers what each column may be: keys by name, variables by name and unit, everything else ignored. */
export function proposeMapping(table: Table, variables: VariableName[]): Mapping {
	const columns: Record<string, ColumnUse> = {};
	const taken = new Set<string>();
	for (const name of table.header) {
		const use = proposeUse(name, variables);
		const key = use.use === 'variable' ? `variable ${use.variable}` : use.use;
		const isFree = use.use === 'ignore' || !taken.has(key);
		columns[name] = isFree ? use : { use: 'ignore' };
		if (isFree) taken.add(key);
	}
	return { columns, delimiter: table.delimiter, decimalSign: table.decimalSign };
}

function proposeUse(column: string, variables: VariableName[]): ColumnUse {
	if (betraysArm(column)) return { use: 'ignore' };
	for (const [use, pattern] of Object.entries(keyNames) as [keyof typeof keyNames, RegExp][]) {
		if (pattern.test(column.trim())) return { use };
	}
	const variable = variables.find((candidate) => isLike(column, candidate));
	if (!variable) return { use: 'ignore' };
	return { use: 'variable', variable: variable.name, unit: findUnit(column) ?? variable.unit };
}

function isLike(column: string, variable: VariableName): boolean {
	const given = slug(column);
	const name = slug(variable.name);
	if (given === name) return true;
	return knownUnits.concat(variable.unit).some((unit) => given === `${name}_${slug(unit)}`);
}

/** The unit that a column's name states, such as `speed [m/s]`, `speed (cm/s)` or `speed_m_s`. */
function findUnit(column: string): string | null {
	const bracketed = /[[(]([^\])]+)[\])]\s*$/.exec(column)?.[1]?.trim();
	if (bracketed) return knownUnits.find((unit) => unit === bracketed) ?? null;
	const given = slug(column);
	const byLength = [...knownUnits].sort((a, b) => b.length - a.length);
	return byLength.find((unit) => given.endsWith(`_${slug(unit)}`)) ?? null;
}

function slug(text: string): string {
	return text
		.toLowerCase()
		.replace(/[^a-z0-9]+/g, '_')
		.replace(/^_|_$/g, '');
}
