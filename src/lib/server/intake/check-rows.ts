import { betraysArm, type ColumnUse, type FileProblem, type Mapping } from '$lib/intake/column-use';
import { findUnitFactor, readNumber } from './read-number';
import { isTooLong, type Table, type TableRow } from './read-table';

export type RosterVisit = {
	/** The day on which the visit is booked, in the lab's zone; null when it is not booked. */
	bookedOn: string | null;
	/** Whether the visit's day has come. */
	hasStarted: boolean;
	/** Blocks of the protocol's visit: number and planned trials. */
	blocks: { number: number; trials: number }[];
	/** Block numbers that are stored already. */
	stored: number[];
};
export type Roster = {
	/** Visits of each participant, by code and visit number. */
	people: Map<string, Map<number, RosterVisit>>;
	variables: { name: string; unit: string; min: number; max: number }[];
};

export type TrialRow = { number: number; execution: (number | null)[] };
export type CheckedBlock = {
	code: string;
	visitNumber: number;
	blockNumber: number;
	plannedTrialCount: number;
	trials: TrialRow[];
};
export type CheckedFile = {
	blocks: CheckedBlock[];
	rowCount: number;
	/** Anything here and nothing is stored. */
	faults: FileProblem[];
	warnings: FileProblem[];
	/** Blank values by variable. */
	blankCounts: Record<string, number>;
};

type KeyUse = 'participant' | 'visit' | 'block' | 'trial' | 'date';
const required: KeyUse[] = ['participant', 'visit', 'block', 'trial'];
const maxProblems = 200;

/**
 * Reads every row by the mapping and checks it against who is expected on which visit. One fault in
 * one row refuses the file as a whole, so that nothing is half imported.
 */
export function checkRows(table: Table, mapping: Mapping, roster: Roster): CheckedFile {
	const check = new FileCheck(table, mapping, roster);
	check.checkColumns();
	if (check.faults.length === 0) for (const row of table.rows) check.addRow(row);
	if (check.faults.length === 0) check.checkBlocks();
	return check.result();
}

class FileCheck {
	readonly faults: FileProblem[] = [];
	readonly warnings: FileProblem[] = [];
	private readonly blocks = new Map<string, CheckedBlock>();
	private readonly blankCounts: Record<string, number> = {};
	private readonly keys: Partial<Record<KeyUse, number>> = {};
	private readonly values: { index: number; factor: number; column: string }[] = [];
	private suppressed = 0;
	/** In a study of one visit the file need not name it. */
	private readonly onlyVisit: number | null;

	constructor(
		private readonly table: Table,
		private readonly mapping: Mapping,
		private readonly roster: Roster
	) {
		this.warnings.push(...table.warnings);
		this.onlyVisit = findOnlyVisit(roster);
	}

	checkColumns(): void {
		const uses = this.table.header.map(
			(name) => this.mapping.columns[name] ?? { use: 'ignore' as const }
		);
		uses.forEach((use, index) => this.checkColumn(use, index));
		for (const key of required) {
			if (key === 'visit' && this.onlyVisit !== null) continue;
			if (this.keys[key] === undefined) {
				this.fault(
					'column-missing',
					null,
					null,
					`No column is read as the ${key} number or code. Choose one.`
				);
			}
		}
		this.roster.variables.forEach((variable, position) => {
			if (!this.values[position]) {
				this.fault(
					'column-missing',
					null,
					null,
					`No column is read as ${variable.name} (${variable.unit}). Choose one.`
				);
			}
		});
	}

	private checkColumn(use: ColumnUse, index: number): void {
		const column = this.table.header[index] ?? '';
		if (betraysArm(column)) {
			const message = `Column ${column} may name the arm: it is ignored and never stored.`;
			this.warn('arm-column-ignored', null, column, message);
			return;
		}
		if (use.use === 'ignore') return;
		if (use.use !== 'variable') {
			if (this.keys[use.use] !== undefined) {
				this.fault('column-twice', null, column, `Two columns are read as ${use.use}. Keep one.`);
			}
			this.keys[use.use] = index;
			return;
		}
		const position = this.roster.variables.findIndex((variable) => variable.name === use.variable);
		const variable = this.roster.variables[position];
		if (!variable)
			return this.fault(
				'unknown-variable',
				null,
				column,
				`The task has no variable ${use.variable}.`
			);
		if (this.values[position]) {
			return this.fault(
				'column-twice',
				null,
				column,
				`Two columns are read as ${variable.name}. Keep one.`
			);
		}
		const factor = findUnitFactor(use.unit, variable.unit);
		if (factor === null) {
			return this.fault(
				'unit-clash',
				null,
				column,
				`${use.unit} cannot be turned into ${variable.unit}, the unit of ${variable.name}.`
			);
		}
		if (factor !== 1)
			this.warn(
				'unit-converted',
				null,
				column,
				`${column} is turned from ${use.unit} into ${variable.unit}.`
			);
		this.values[position] = { index, factor, column };
	}

	addRow({ line, fields }: TableRow): void {
		const want = this.table.header.length;
		const extra = fields.slice(want);
		if (fields.length < want || extra.some((field) => field !== '')) {
			const message = `Line ${line} has ${fields.length} fields, the header has ${want}.`;
			return this.fault(
				fields.length < want ? 'too-few-fields' : 'too-many-fields',
				line,
				null,
				message
			);
		}
		const longest = fields.findIndex(isTooLong);
		if (longest >= 0) {
			const column = this.table.header[longest] ?? '';
			const message = `Line ${line}, column ${column}: ${fields[longest]?.length} characters (“${fields[longest]?.slice(0, 40)}…”).`;
			return this.fault('field-too-long', line, column, message);
		}
		const block = this.findBlock(line, fields);
		const number = this.readCount('trial', line, fields);
		if (!block || number === null) return;
		const execution = this.readExecution(line, fields);
		if (execution) block.trials.push({ number, execution });
	}

	private findBlock(line: number, fields: string[]): CheckedBlock | null {
		const code = fields[this.keys.participant ?? -1] ?? '';
		const person = this.roster.people.get(code);
		const visitNumber =
			this.keys.visit === undefined ? this.onlyVisit : this.readCount('visit', line, fields);
		const blockNumber = this.readCount('block', line, fields);
		if (!person)
			return this.keyFault(
				'unknown-participant',
				'participant',
				line,
				`no participant with the code “${code.slice(0, 40)}” takes part. Check the code, or enrol them first.`
			);
		if (visitNumber === null || blockNumber === null) return null;
		const visit = person.get(visitNumber);
		if (!visit)
			return this.keyFault(
				'unknown-visit',
				'visit',
				line,
				`the protocol has no visit ${visitNumber}.`
			);
		if (visit.bookedOn === null)
			return this.keyFault(
				'visit-not-booked',
				'visit',
				line,
				`${code} has no booking for visit ${visitNumber}.`
			);
		if (!visit.hasStarted)
			return this.keyFault(
				'visit-not-yet',
				'visit',
				line,
				`visit ${visitNumber} of ${code} is on ${visit.bookedOn}: it has not begun.`
			);
		if (!this.dateFits(line, fields, visit.bookedOn, code, visitNumber)) return null;
		const planned = visit.blocks.find((block) => block.number === blockNumber);
		if (!planned)
			return this.keyFault(
				'unknown-block',
				'block',
				line,
				`visit ${visitNumber} has no block ${blockNumber}.`
			);
		if (visit.stored.includes(blockNumber))
			return this.keyFault(
				'block-stored',
				'block',
				line,
				`block ${blockNumber} of visit ${visitNumber} of ${code} is stored already.`
			);
		return this.openBlock({ code, visitNumber, blockNumber, plannedTrialCount: planned.trials });
	}

	private openBlock(key: Omit<CheckedBlock, 'trials'>): CheckedBlock {
		const id = `${key.code}\u0000${key.visitNumber}\u0000${key.blockNumber}`;
		const found = this.blocks.get(id) ?? { ...key, trials: [] };
		this.blocks.set(id, found);
		return found;
	}

	private dateFits(
		line: number,
		fields: string[],
		bookedOn: string,
		code: string,
		visit: number
	): boolean {
		const index = this.keys.date;
		if (index === undefined) return true;
		const given = fields[index] ?? '';
		if (given === '' || given === bookedOn) return true;
		const message = /^\d{4}-\d\d-\d\d$/.test(given)
			? `${given} is not the day of visit ${visit} of ${code} (${bookedOn}). Wrong person or visit?`
			: `“${given.slice(0, 40)}” is no date like ${bookedOn}: write year-month-day, or ignore the column.`;
		this.keyFault('wrong-date', 'date', line, message);
		return false;
	}

	private readCount(key: KeyUse, line: number, fields: string[]): number | null {
		const field = fields[this.keys[key] ?? -1] ?? '';
		if (/^\d{1,6}(\.0+)?$/.test(field) && Number(field) >= 1) return Number(field);
		this.keyFault(
			'not-a-count',
			key,
			line,
			`“${field.slice(0, 40)}” is no whole number from 1 up.`
		);
		return null;
	}

	private readExecution(line: number, fields: string[]): (number | null)[] | null {
		const execution: (number | null)[] = [];
		for (const [position, variable] of this.roster.variables.entries()) {
			const source = this.values[position];
			if (!source) return null;
			const read = readNumber(fields[source.index] ?? '', this.mapping.decimalSign);
			if (read.kind === 'fault') {
				this.fault(
					'not-a-number',
					line,
					source.column,
					`Line ${line}, column ${source.column}: “${(fields[source.index] ?? '').slice(0, 40)}” is no number.`
				);
				return null;
			}
			if (read.kind === 'blank')
				this.blankCounts[variable.name] = (this.blankCounts[variable.name] ?? 0) + 1;
			execution.push(read.kind === 'value' ? read.value * source.factor : null);
		}
		return execution;
	}

	checkBlocks(): void {
		for (const block of this.blocks.values()) {
			const inOrder = [...block.trials].sort((a, b) => a.number - b.number);
			const where = `${block.code}, visit ${block.visitNumber}, block ${block.blockNumber}`;
			const twice = inOrder.find((trial, index) => inOrder[index + 1]?.number === trial.number);
			if (twice) {
				this.fault(
					'trial-twice',
					null,
					null,
					`${where}: trial ${twice.number} stands in the file twice.`
				);
				continue;
			}
			if (inOrder.some((trial, index) => trial !== block.trials[index])) {
				this.warn(
					'rows-not-in-trial-order',
					null,
					null,
					`${where}: rows were put in the order of trials.`
				);
			}
			block.trials = inOrder;
			const missing = findMissing(inOrder);
			if (missing.length > 0) {
				this.warn(
					'trial-gap',
					null,
					null,
					`${where}: trials ${missing.slice(0, 20).join(', ')}${missing.length > 20 ? ' …' : ''} are missing. They are not filled.`
				);
			}
			if (inOrder.length !== block.plannedTrialCount) {
				this.warn(
					'trial-count',
					null,
					null,
					`${where}: ${inOrder.length} trials; the protocol plans ${block.plannedTrialCount}.`
				);
			}
		}
		for (const [name, count] of Object.entries(this.blankCounts)) {
			this.warn(
				'blank-values',
				null,
				name,
				`${name} is blank in ${count} trials. They are stored as blank and left out of the cloud.`
			);
		}
	}

	private keyFault(code: string, key: KeyUse, line: number, message: string): null {
		const column = this.table.header[this.keys[key] ?? -1] ?? key;
		this.fault(code, line, column, `Line ${line}, column ${column}: ${message}`);
		return null;
	}

	private fault(code: string, line: number | null, column: string | null, message: string): void {
		if (this.faults.length < maxProblems) this.faults.push({ code, line, column, message });
		else this.suppressed += 1;
	}

	private warn(code: string, line: number | null, column: string | null, message: string): void {
		if (this.warnings.length < maxProblems) this.warnings.push({ code, line, column, message });
	}

	result(): CheckedFile {
		if (this.suppressed > 0) {
			const message = `${this.suppressed} more faults of these kinds are not listed.`;
			this.faults.push({ code: 'more', line: null, column: null, message });
		}
		const blocks = this.faults.length > 0 ? [] : [...this.blocks.values()];
		return {
			blocks,
			rowCount: this.table.rows.length,
			faults: this.faults,
			warnings: this.warnings,
			blankCounts: this.blankCounts
		};
	}
}

function findOnlyVisit({ people }: Roster): number | null {
	const [numbers] = [...people.values()].map((visits) => [...visits.keys()]);
	return numbers?.length === 1 ? (numbers[0] ?? null) : null;
}

function findMissing(inOrder: TrialRow[]): number[] {
	const present = new Set(inOrder.map((trial) => trial.number));
	const first = inOrder[0]?.number ?? 1;
	const count = (inOrder.at(-1)?.number ?? 0) - first + 1;
	return Array.from({ length: count }, (_, index) => first + index).filter((n) => !present.has(n));
}
