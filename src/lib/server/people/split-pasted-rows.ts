import { enrolmentColumns, maxRowCount, type EnrolmentColumn } from '$lib/people/enrolment-columns';
import { readTableText, type Separator, type TableText, type TextRow } from '$lib/ui/table-text';

export type PastedRow = TextRow<EnrolmentColumn>;
export type PastedRows = TableText<EnrolmentColumn>;
export type { Separator };

/** Pasted people, cell by cell; the columns in their usual order unless a first row names them. */
export function splitPastedRows(text: string): PastedRows {
	return readTableText(text, enrolmentColumns, maxRowCount);
}
