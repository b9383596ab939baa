import { eq } from 'drizzle-orm';
import {
	checkCells,
	makeFault,
	type CellDefaults,
	type PersonToEnrol
} from '$lib/people/check-cells';
import type { CheckedRow, EnrolmentCells } from '$lib/people/enrolment-columns';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { lab } from '$lib/server/db/schema';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { findEnrolled } from './find-enrolled';
import { findTakenCodes } from './find-taken-codes';

export type RowToCheck = { line: number; cells: EnrolmentCells };

/** A row without faults carries the person it stands for. */
export type ReadRow = CheckedRow & { person: (PersonToEnrol & { emailIndex: string }) | null };

/**
 * Checks rows as they were typed: each cell by itself, then the addresses against each other and
 * against everybody who is enrolled already. Stores nothing.
 */
export async function checkRows(
	db: Queryable,
	grant: Grant<'participant:enrol'>,
	{ keys, rows }: { keys: PeopleKeys; rows: readonly RowToCheck[] }
): Promise<ReadRow[]> {
	const defaults = await loadCellDefaults(db, grant);
	const read = rows.map((row) => readRow(row, { defaults, keys }));
	const indexes = read.flatMap(({ person }) => (person ? [person.emailIndex] : []));
	const enrolled = await findEnrolled(db, grant.studyId, indexes);
	const taken = await findTakenCodes(db, grant.studyId);
	const firstLines = new Map<string, number>();
	return read
		.map((row) => findTwin(row, enrolled, firstLines))
		.map((row) => refuseTakenCode(row, taken));
}

/** What empty cells stand for in this lab. */
export async function loadCellDefaults(
	db: Queryable,
	grant: Grant<'participant:enrol'>
): Promise<CellDefaults> {
	const [found] = await db.select({ zone: lab.zone }).from(lab).where(eq(lab.id, grant.labId));
	return { zone: found?.zone ?? 'UTC', language: 'en' };
}

function readRow(
	{ line, cells }: RowToCheck,
	{ defaults, keys }: { defaults: CellDefaults; keys: PeopleKeys }
): ReadRow {
	const answer = checkCells(cells, defaults);
	if (!answer.ok) return { line, cells, faults: answer.faults, person: null };
	const emailIndex = keys.indexEmail(answer.person.email);
	return { line, cells, faults: [], person: { ...answer.person, emailIndex } };
}

function findTwin(
	row: ReadRow,
	enrolled: ReadonlyMap<string, string>,
	firstLines: Map<string, number>
): ReadRow {
	if (!row.person) return row;
	const { emailIndex } = row.person;
	const code = enrolled.get(emailIndex);
	const firstLine = firstLines.get(emailIndex);
	firstLines.set(emailIndex, firstLine ?? row.line);
	if (!code && firstLine === undefined) return row;
	const message = code ? `is enrolled already, as ${code}` : `stands in line ${firstLine} already`;
	return { ...row, faults: [makeFault('email', row.cells, message)], person: null };
}

/** A code given by hand must be free; those of the rows before count as taken. */
function refuseTakenCode(row: ReadRow, taken: Set<string>): ReadRow {
	const code = row.person?.code ?? '';
	if (code === '') return row;
	if (!taken.has(code)) {
		taken.add(code);
		return row;
	}
	return { ...row, faults: [makeFault('code', row.cells, 'is taken already')], person: null };
}
