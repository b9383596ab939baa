import { z } from 'zod';
import {
	emptyCells,
	enrolmentColumns,
	maxRowCount,
	type EnrolmentCells
} from '$lib/people/enrolment-columns';

const cellsSchema = z.object({
	name: z.string().max(400),
	email: z.string().max(400),
	language: z.string().max(400),
	zone: z.string().max(400),
	availability: z.string().max(400),
	phone: z.string().max(400),
	code: z.string().max(400)
});

/** Rows as the page sends them to be checked while somebody mends a cell. */
export const rowsSchema = z
	.array(z.object({ line: z.number().int().min(1), cells: cellsSchema }))
	.min(1)
	.max(maxRowCount);
export type RowsToSend = z.infer<typeof rowsSchema>;

/** Rows from a plain form: `line.0`, `cell.0.name`, `cell.0.email` and so on. */
export function readRowsForm(form: FormData): RowsToSend {
	const rows: RowsToSend = [];
	for (let index = 0; form.has(`line.${index}`); index += 1) {
		const cells: EnrolmentCells = { ...emptyCells };
		for (const { key } of enrolmentColumns) {
			const value = form.get(`cell.${index}.${key}`);
			cells[key] = typeof value === 'string' ? value : '';
		}
		rows.push({ line: Number(form.get(`line.${index}`)), cells });
	}
	return rowsSchema.parse(rows);
}

const faultSchema = z.object({
	column: z.enum(['name', 'email', 'language', 'zone', 'availability', 'phone', 'code']),
	columnNumber: z.number(),
	columnLabel: z.string(),
	value: z.string(),
	message: z.string(),
	suggestion: z.string().nullable()
});

/** What checking answers: the rows with their faults, and which codes would be given. */
export const checkedSchema = z.object({
	rows: z.array(z.object({ line: z.number(), cells: cellsSchema, faults: z.array(faultSchema) })),
	codes: z.object({ first: z.string(), last: z.string() }).nullable()
});
export type Checked = z.infer<typeof checkedSchema>;
