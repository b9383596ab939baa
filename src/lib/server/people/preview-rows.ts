import type { CheckedRow } from '$lib/people/enrolment-columns';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { checkRows, type RowToCheck } from './check-rows';
import { foretellCodes } from './enrol-people';

export type RowsPreview = {
	rows: CheckedRow[];
	/** The codes the rows without faults would get; null when there are none. */
	codes: { first: string; last: string } | null;
};

/** What would happen to these rows: their faults, and the codes of those without any. */
export async function previewRows(
	db: Queryable,
	grant: Grant<'participant:enrol'>,
	{ keys, rows }: { keys: PeopleKeys; rows: readonly RowToCheck[] }
): Promise<RowsPreview> {
	const checked = await checkRows(db, grant, { keys, rows });
	const goodCount = checked.filter(({ person }) => person !== null).length;
	return {
		rows: checked.map(({ line, cells, faults }) => ({ line, cells, faults })),
		codes: await foretellCodes(db, grant, goodCount)
	};
}
