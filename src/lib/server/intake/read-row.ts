import type { Mapping } from '$lib/intake/column-use';
import { findOnlyVisit, type Roster, type RosterVisit } from './roster';
import type { ProblemList } from './problem-list';
import type { Columns, KeyUse } from './read-columns';
import { readNumber } from './read-number';
import { isTooLong, type TableRow } from './read-table';

export type RowTask = {
	columns: Columns;
	mapping: Mapping;
	roster: Roster;
	problems: ProblemList;
};

/** One trial as it will be stored, and the block it belongs to. */
export type ReadTrial = {
	code: string;
	visitNumber: number;
	blockNumber: number;
	plannedTrialCount: number;
	number: number;
	execution: (number | null)[];
};

/** Reads one row and checks it against who is expected; a row with a fault gives null. */
export function readRow(task: RowTask, row: TableRow): ReadTrial | null {
	if (!hasShape(task, row)) return null;
	const block = findBlock(task, row);
	const number = readCount(task, row, 'trial');
	if (!block || number === null) return null;
	const execution = readExecution(task, row);
	return execution && { ...block, number, execution };
}

function hasShape({ columns, problems }: RowTask, { line, fields }: TableRow): boolean {
	const want = columns.header.length;
	const extra = fields.slice(want);
	if (fields.length < want || extra.some((field) => field !== '')) {
		const code = fields.length < want ? 'too-few-fields' : 'too-many-fields';
		const message = `Line ${line} has ${fields.length} fields, the header has ${want}.`;
		problems.fault(code, message, { line });
		return false;
	}
	const longest = fields.findIndex(isTooLong);
	if (longest < 0) return true;
	const column = columns.header[longest] ?? '';
	const field = fields[longest] ?? '';
	const message = `Line ${line}, column ${column}: ${field.length} characters (“${field.slice(0, 40)}…”).`;
	problems.fault('field-too-long', message, { line, column });
	return false;
}

function findBlock(task: RowTask, row: TableRow) {
	const { columns, roster } = task;
	const code = row.fields[columns.keys.participant ?? -1] ?? '';
	const fault = keyFaultOf(task, row);
	const person = roster.people.get(code);
	const visitNumber =
		columns.keys.visit === undefined ? findOnlyVisit(roster) : readCount(task, row, 'visit');
	const blockNumber = readCount(task, row, 'block');
	if (!person) {
		const who = `no participant with the code “${code.slice(0, 40)}” takes part`;
		return fault(
			'unknown-participant',
			'participant',
			`${who}. Check the code, or enrol them first.`
		);
	}
	if (visitNumber === null || blockNumber === null) return null;
	const visit = person.get(visitNumber);
	if (!visit) return fault('unknown-visit', 'visit', `the protocol has no visit ${visitNumber}.`);
	const key = { code, visitNumber, blockNumber };
	if (!isExpected(task, row, { key, visit })) return null;
	const planned = visit.blocks.find(({ number }) => number === blockNumber);
	return planned ? { ...key, plannedTrialCount: planned.trials } : null;
}

type Expected = {
	key: { code: string; visitNumber: number; blockNumber: number };
	visit: RosterVisit;
};

function isExpected(task: RowTask, row: TableRow, { key, visit }: Expected): boolean {
	const { code, visitNumber, blockNumber } = key;
	const fault = keyFaultOf(task, row);
	const ofCode = `visit ${visitNumber} of ${code}`;
	if (visit.bookedOn === null) {
		const message = `${code} has no booking for visit ${visitNumber}.`;
		fault('visit-not-booked', 'visit', message);
	} else if (!visit.hasStarted) {
		fault('visit-not-yet', 'visit', `${ofCode} is on ${visit.bookedOn}: it has not begun.`);
	} else if (!dateFits(task, row, { bookedOn: visit.bookedOn, ofCode })) {
		return false;
	} else if (!visit.blocks.some(({ number }) => number === blockNumber)) {
		fault('unknown-block', 'block', `visit ${visitNumber} has no block ${blockNumber}.`);
	} else if (visit.stored.includes(blockNumber)) {
		fault('block-stored', 'block', `block ${blockNumber} of ${ofCode} is stored already.`);
	} else {
		return true;
	}
	return false;
}

function dateFits(
	task: RowTask,
	row: TableRow,
	{ bookedOn, ofCode }: { bookedOn: string; ofCode: string }
): boolean {
	const index = task.columns.keys.date;
	if (index === undefined) return true;
	const given = row.fields[index] ?? '';
	if (given === '' || given === bookedOn) return true;
	const message = /^\d{4}-\d\d-\d\d$/.test(given)
		? `${given} is not the day of ${ofCode} (${bookedOn}). Wrong person or visit?`
		: `“${given.slice(0, 40)}” is no date like ${bookedOn}: write year-month-day, or ignore the column.`;
	keyFaultOf(task, row)('wrong-date', 'date', message);
	return false;
}

function readCount(task: RowTask, row: TableRow, key: KeyUse): number | null {
	const field = row.fields[task.columns.keys[key] ?? -1] ?? '';
	if (/^\d{1,6}(\.0+)?$/.test(field) && Number(field) >= 1) return Number(field);
	const message = `“${field.slice(0, 40)}” is no whole number from 1 up.`;
	return keyFaultOf(task, row)('not-a-count', key, message);
}

function readExecution(
	{ columns, mapping, problems }: RowTask,
	{ line, fields }: TableRow
): (number | null)[] | null {
	const execution: (number | null)[] = [];
	for (const source of columns.values) {
		if (!source) return null;
		const { index, factor, column } = source;
		const field = fields[index] ?? '';
		const read = readNumber(field, mapping.decimalSign);
		if (read.kind === 'fault') {
			const message = `Line ${line}, column ${column}: “${field.slice(0, 40)}” is no number.`;
			problems.fault('not-a-number', message, { line, column });
			return null;
		}
		execution.push(read.kind === 'value' ? read.value * factor : null);
	}
	return execution;
}

/** A fault at one of the columns that say whose trial it is; gives null. */
function keyFaultOf({ columns, problems }: RowTask, { line }: TableRow) {
	return (code: string, key: KeyUse, message: string): null => {
		const column = columns.header[columns.keys[key] ?? -1] ?? key;
		problems.fault(code, `Line ${line}, column ${column}: ${message}`, { line, column });
		return null;
	};
}
